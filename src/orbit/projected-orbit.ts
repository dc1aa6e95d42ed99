/**
 * The companion's path on the sky, in stellar radii about the star's centre, in coordinates that stay regular at e = 0.
 *
 * With F the eccentric longitude (E + omega), the place in the orbit's plane is linear in cos F and sin F:
 * x = (1 - h^2 beta) cos F + h k beta sin F - k, y = h k beta cos F + (1 - k^2 beta) sin F - h, in units of a, with
 * k = e cos omega, h = e sin omega (omega of the star's orbit) and beta = 1/(1 + sqrt(1 - e^2)). The y axis points to the
 * observer at i = 90 deg, so that the companion is in front where y > 0, and inferior conjunction is x = 0 there
 * (true anomaly 90 deg - omega). On the sky z^2 = (rho x)^2 + (w y)^2, rho = a/R_star, w = rho cos i = b (1 + h)/(1 - e^2).
 * [own derivation; tested against difference quotients]
 *
 * Light time: the companion is seen where it was a time earlier that counts from inferior conjunction, which keeps its
 * observed time; superior conjunction of a circular orbit comes 2a/c sin i later. The companion's mass is neglected
 * against the star's here (its own motion shortens the delay by the ratio of the masses).
 */
import { TWO_PI } from './constants.js';

/** Number of coordinates of the path: ln P, lambda0, k, h, b, ln(a/R_star). */
export const PATH_COORDINATES = 6;

/** Light crosses the orbit much faster than the companion: a larger ratio of the two speeds is refused. */
const LARGEST_LIGHT_RATIO = 0.1;
const MOST_LIGHT_STEPS = 20;

export class ProjectedOrbit {
  /** 2 pi / P, rad a day. */
  rate = 0;
  /** Mean longitude at time 0, rad. */
  longitude = 0;
  /** Mean longitude minus this is the mean anomaly, rad. */
  omega = 0;
  eccentricity = 0;
  /** a / R_star */
  scaledAxis = 0;
  /** Separation in stellar radii, after `place` or `placeAt`. */
  separation = 0;
  /** Whether the companion is nearer than the star, after `place` or `placeAt`. */
  inFront = false;
  /** d(z^2)/dF / 2, after `placeAt`. */
  slope = 0;
  /** d2(z^2)/dF2 / 2, after `placeAt`. */
  bend = 0;
  /** (6) z dz by ln P, lambda0, k, h, b, ln(a/R_star), after `place` with partials; regular at z = 0 too. */
  readonly halfGradient: Float64Array = new Float64Array(PATH_COORDINATES);

  #k = 0;
  #h = 0;
  #cosOmega = 1;
  #sinOmega = 0;
  #eta = 1;
  #xc = 1;
  #xs = 0;
  #yc = 1;
  /** rho cos i */
  #tilt = 0;
  #tiltPerB = 0;
  #tiltByK = 0;
  #tiltByH = 0;
  /** y at inferior conjunction. */
  #frontY = 1;
  /** Orbital speed over that of light, a sin i n / c; 0 without light time. */
  #light = 0;
  #lightByTilt = 0;
  #lightByAxis = 0;

  /**
   * Takes one orbit.
   *
   * @param lnPeriod - P in days
   * @param longitudeRad - mean longitude at time 0
   * @param k - e cos omega
   * @param h - e sin omega
   * @param impactParameter - of the transit, stellar radii; negative mirrors the path
   * @param starRadiusLightDays - R_star / c, days; 0 ignores light time
   * @returns false outside the domain: not finite, e >= 1, |cos i| >= 1, periastron inside the star
   */
  prepare(
    lnPeriod: number,
    longitudeRad: number,
    k: number,
    h: number,
    impactParameter: number,
    lnScaledAxis: number,
    starRadiusLightDays: number,
  ): boolean {
    const e = Math.hypot(k, h);
    const axis = Math.exp(lnScaledAxis);
    const rate = TWO_PI * Math.exp(-lnPeriod);
    if (!(e < 1 && rate > 0) || !Number.isFinite(rate + longitudeRad + axis)) return false;
    const eta2 = (1 - e) * (1 + e);
    const tiltPerB = (1 + h) / eta2;
    const tilt = impactParameter * tiltPerB;
    if (!(Math.abs(tilt) < axis && axis * (1 - e) > 1)) return false;
    const alongSight = Math.sqrt((axis - tilt) * (axis + tilt));
    const lightPerRadius = rate * starRadiusLightDays;
    const light = lightPerRadius * alongSight;
    if (!(light >= 0 && light <= LARGEST_LIGHT_RATIO * (1 - e))) return false;
    this.rate = rate;
    this.longitude = longitudeRad;
    this.eccentricity = e;
    this.scaledAxis = axis;
    this.omega = e > 0 ? Math.atan2(h, k) : 0;
    this.#cosOmega = e > 0 ? k / e : 1;
    this.#sinOmega = e > 0 ? h / e : 0;
    this.#k = k;
    this.#h = h;
    this.#eta = Math.sqrt(eta2);
    const beta = 1 / (1 + this.#eta);
    this.#xc = 1 - h * h * beta;
    this.#xs = h * k * beta;
    this.#yc = 1 - k * k * beta;
    this.#tilt = tilt;
    this.#tiltPerB = tiltPerB;
    this.#tiltByK = (2 * k * tilt) / eta2;
    this.#tiltByH = (impactParameter + 2 * h * tilt) / eta2;
    this.#frontY = eta2 / (1 + h);
    this.#light = light;
    this.#lightByTilt = (-lightPerRadius * tilt) / alongSight;
    this.#lightByAxis = (lightPerRadius * axis * axis) / alongSight;
    return true;
  }

  /**
   * Places the companion from a solution of Kepler's equation: `separation`, `inFront` and, on request, `halfGradient`.
   *
   * @param sinE - of the mean anomaly (observed mean longitude - omega)
   * @param advanceRad - observed mean longitude minus `longitude`, revolutions counted: rate times time
   */
  place(sinE: number, cosE: number, advanceRad: number, withPartials: boolean): void {
    let sinF = sinE * this.#cosOmega + cosE * this.#sinOmega;
    let cosF = cosE * this.#cosOmega - sinE * this.#sinOmega;
    const k = this.#k;
    const h = this.#h;
    const xc = this.#xc;
    const xs = this.#xs;
    const yc = this.#yc;
    const light = this.#light;
    if (light > 0) {
      // F - k sin F + h cos F + light (frontY - y) = observed longitude, by Newton from the solution without light time.
      const [sin0, cos0] = [sinF, cosF];
      const swing0 = k * sinF - h * cosF;
      let turn = 0;
      for (let step = 0; step < MOST_LIGHT_STEPS; step++) {
        const behind = this.#frontY - (xs * cosF + yc * sinF - h);
        const miss = turn - (k * sinF - h * cosF - swing0) + light * behind;
        const change = miss / (1 - k * cosF - h * sinF - light * (yc * cosF - xs * sinF));
        turn -= change;
        const sinTurn = Math.sin(turn);
        const cosTurn = Math.cos(turn);
        sinF = sin0 * cosTurn + cos0 * sinTurn;
        cosF = cos0 * cosTurn - sin0 * sinTurn;
        if (Math.abs(change) < 1e-9) break; // the next one would be of the order of its square
      }
    }
    const x = xc * cosF + xs * sinF - k;
    const y = xs * cosF + yc * sinF - h;
    const axis2 = this.scaledAxis * this.scaledAxis;
    const tilt = this.#tilt;
    const tilt2 = tilt * tilt;
    this.separation = Math.sqrt(axis2 * x * x + tilt2 * y * y);
    this.inFront = y > 0;
    if (!withPartials) return;

    const xF = xs * cosF - xc * sinF;
    const yF = yc * cosF - xs * sinF;
    const slope = axis2 * x * xF + tilt2 * y * yF;
    const perLongitude = slope / (1 - k * cosF - h * sinF - light * yF);
    const eta = this.#eta;
    const beta = 1 / (1 + eta);
    const betaByK = (beta * beta * k) / eta;
    const betaByH = (beta * beta * h) / eta;
    const xsByK = h * beta + h * k * betaByK;
    const xsByH = k * beta + h * k * betaByH;
    const xByK = -h * h * betaByK * cosF + xsByK * sinF - 1;
    const xByH = -(2 * h * beta + h * h * betaByH) * cosF + xsByH * sinF;
    const yByK = xsByK * cosF - (2 * k * beta + k * k * betaByK) * sinF;
    const yByH = xsByH * cosF - k * k * betaByH * sinF - 1;
    const frontY = this.#frontY;
    const behind = frontY - y;
    const byTilt = tilt * y * y - perLongitude * this.#lightByTilt * behind;
    const frontYByK = (-2 * k) / (1 + h);
    const frontYByH = (-2 * h - frontY) / (1 + h);
    const gradient = this.halfGradient;
    gradient[0] = perLongitude * (light * behind - advanceRad);
    gradient[1] = perLongitude;
    gradient[2] =
      axis2 * x * xByK +
      tilt2 * y * yByK +
      byTilt * this.#tiltByK +
      perLongitude * (sinF - light * (frontYByK - yByK));
    gradient[3] =
      axis2 * x * xByH +
      tilt2 * y * yByH +
      byTilt * this.#tiltByH -
      perLongitude * (cosF + light * (frontYByH - yByH));
    gradient[4] = byTilt * this.#tiltPerB;
    gradient[5] = axis2 * x * x - perLongitude * this.#lightByAxis * behind;
  }

  /** Places the companion at an eccentric longitude F (rad): `separation`, `inFront`, `slope`, `bend`. */
  placeAt(eccentricLongitudeRad: number): void {
    const cosF = Math.cos(eccentricLongitudeRad);
    const sinF = Math.sin(eccentricLongitudeRad);
    const x = this.#xc * cosF + this.#xs * sinF - this.#k;
    const y = this.#xs * cosF + this.#yc * sinF - this.#h;
    const xF = this.#xs * cosF - this.#xc * sinF;
    const yF = this.#yc * cosF - this.#xs * sinF;
    const axis2 = this.scaledAxis * this.scaledAxis;
    const tilt2 = this.#tilt * this.#tilt;
    this.separation = Math.sqrt(axis2 * x * x + tilt2 * y * y);
    this.inFront = y > 0;
    this.slope = axis2 * x * xF + tilt2 * y * yF;
    this.bend = axis2 * (xF * xF - x * (x + this.#k)) + tilt2 * (yF * yF - y * (y + this.#h));
  }

  /** Mean longitude (rad) at which the companion is seen at an eccentric longitude F (rad), on the same revolution. */
  observedLongitude(eccentricLongitudeRad: number): number {
    const cosF = Math.cos(eccentricLongitudeRad);
    const sinF = Math.sin(eccentricLongitudeRad);
    const behind = this.#frontY - (this.#xs * cosF + this.#yc * sinF - this.#h);
    return eccentricLongitudeRad - (this.#k * sinF - this.#h * cosF) + this.#light * behind;
  }

  /**
   * Eccentric longitude F (rad) near a conjunction where rho x equals a reach: F within half a turn of 90 deg (in front)
   * or 270 deg (behind).
   *
   * @param reach - stellar radii, |reach| < rho (1 - e): then there is exactly one such place on either side
   */
  longitudeAtReach(reach: number, front: boolean): number {
    // With u the true longitude, x = (1 - e^2) cos u / (1 + k cos u + h sin u): linear in cos u and sin u.
    const level = reach / this.scaledAxis;
    const a = this.#eta * this.#eta - level * this.#k;
    const b = -level * this.#h;
    const half = Math.acos(level / Math.hypot(a, b));
    const middle = Math.atan2(b, a);
    const u = front ? middle + half : middle - half + TWO_PI;
    const beta = 1 / (1 + this.#eta);
    const [sinU, cosU] = [Math.sin(u), Math.cos(u)];
    return (
      u -
      2 * Math.atan2(beta * (this.#k * sinU - this.#h * cosU), 1 + beta * (this.#k * cosU + this.#h * sinU))
    );
  }
}
