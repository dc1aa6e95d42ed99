/**
 * Parameters element by element, for companions about which the case states something: an element is free, fixed,
 * confined to a range (through a logistic map) or under a Gaussian prior.
 */
import { ModelDomainError } from '../../errors.js';
import type { ElementChoice, ElementName } from '../../observations/types.js';
import type { Parametrisation, RelativeElements } from './parametrisation.js';

const RADIANS = Math.PI / 180;

/** One stated element on the solver's scale: value(u) with derivative, and its inverse. */
interface Dial {
  readonly fixed: number | null;
  value(u: number): number;
  slope(u: number): number;
  parameter(value: number): number;
  /** Centre and width of a Gaussian prior on the value, or null. */
  readonly prior: { readonly centre: number; readonly sigma: number } | null;
}

const identity: Omit<Dial, 'fixed' | 'prior'> = {
  value: (u) => u,
  slope: () => 1,
  parameter: (value) => value,
};
const exponential: Omit<Dial, 'fixed' | 'prior'> = { value: Math.exp, slope: Math.exp, parameter: Math.log };

function logistic(low: number, high: number): Omit<Dial, 'fixed' | 'prior'> {
  const share = (u: number): number => 1 / (1 + Math.exp(-u));
  return {
    value: (u) => low + (high - low) * share(u),
    slope: (u) => (high - low) * share(u) * (1 - share(u)),
    parameter(value) {
      const s = Math.min(0.999, Math.max(0.001, (value - low) / (high - low)));
      return Math.log(s / (1 - s));
    },
  };
}

function makeDial(
  choice: ElementChoice | undefined,
  free: Omit<Dial, 'fixed' | 'prior'>,
  scale: number,
  shift = 0,
): Dial {
  if (choice === undefined) return { ...free, fixed: null, prior: null };
  switch (choice.kind) {
    case 'fixed':
      return { ...identity, fixed: choice.value * scale - shift, prior: null };
    case 'range':
      return {
        ...logistic(choice.low * scale - shift, choice.high * scale - shift),
        fixed: null,
        prior: null,
      };
    case 'prior':
      return {
        ...free,
        fixed: null,
        prior: { centre: choice.value * scale - shift, sigma: choice.sigma * scale },
      };
  }
}

/**
 * @param choices - what the case states, in the case's units (d, deg, BJD, m/s)
 * @param circular - e = 0 imposed
 * @param epochBjdTdb - zero of the solver's time axis
 * @throws ModelDomainError when both times are stated, which would over-determine the orbit
 */
export function statedParametrisation(
  choices: Partial<Readonly<Record<ElementName, ElementChoice>>>,
  circular: boolean,
  epochBjdTdb: number,
): Parametrisation {
  if (choices.timeOfPeriastron !== undefined && choices.timeOfInferiorConjunction !== undefined) {
    throw new ModelDomainError(
      'number of stated times of one companion',
      2,
      'one: periastron or inferior conjunction',
    );
  }
  const byPeriastron = choices.timeOfPeriastron !== undefined;
  const imposed: ElementChoice = { kind: 'fixed', value: 0 };
  const period = makeDial(choices.period, exponential, 1);
  const eccentricity = makeDial(circular ? imposed : choices.eccentricity, logistic(0, 0.995), 1);
  const omega = makeDial(
    circular ? { kind: 'fixed', value: 90 } : choices.argumentOfPeriastron,
    identity,
    RADIANS,
  );
  const time = makeDial(
    byPeriastron ? choices.timeOfPeriastron : choices.timeOfInferiorConjunction,
    identity,
    1,
    epochBjdTdb,
  );
  const amplitude = makeDial(choices.semiAmplitude, exponential, 1);
  const dials = [period, eccentricity, omega, time, amplitude];
  const freeDials = dials.filter((dial) => dial.fixed === null);
  const size = freeDials.length;
  const columnOf = dials.map((dial) => (dial.fixed === null ? freeDials.indexOf(dial) : -1));
  const priorDials = dials.filter((dial) => dial.prior !== null);

  function values(free: Float64Array, offset: number): number[] {
    return dials.map((dial, d) => dial.fixed ?? dial.value(free[offset + columnOf[d]!]!));
  }

  return {
    size,
    circular,
    coordinateOf: null,
    priorCount: priorDials.length,
    toCoordinates(free, offset, coordinates, jacobian): boolean {
      const [p, e, w, t, k] = values(free, offset) as [number, number, number, number, number];
      if (!(p > 0) || !(e >= 0 && e < 1) || !Number.isFinite(w + t + k)) return false;
      const rate = (2 * Math.PI) / p;
      const passage = byPeriastron ? { meanAnomaly: 0, byE: 0, byOmega: 0 } : conjunctionAnomaly(e, w);
      const c = Math.cos(w);
      const s = Math.sin(w);
      coordinates[0] = Math.log(p);
      coordinates[1] = w + passage.meanAnomaly - rate * t;
      coordinates[2] = e * c;
      coordinates[3] = e * s;
      coordinates[4] = k;
      if (jacobian === null) return true;
      jacobian.fill(0);
      // Rows: coordinates; columns: elements P, e, omega, t, K times the slope of the element's dial.
      const put = (row: number, element: number, derivative: number): void => {
        const column = columnOf[element]!;
        if (column >= 0)
          jacobian[row * size + column] = derivative * dials[element]!.slope(free[offset + column]!);
      };
      put(0, 0, 1 / p);
      put(1, 0, (rate * t) / p);
      put(1, 1, passage.byE);
      put(1, 2, 1 + passage.byOmega);
      put(1, 3, -rate);
      put(2, 1, c);
      put(2, 2, -e * s);
      put(3, 1, s);
      put(3, 2, e * c);
      put(4, 4, 1);
      return true;
    },
    priors(free, offset, rows, jacobian): void {
      jacobian?.fill(0);
      priorDials.forEach((dial, row) => {
        const column = freeDials.indexOf(dial);
        const u = free[offset + column]!;
        let difference = dial.value(u) - dial.prior!.centre;
        if (dial === omega) difference -= 2 * Math.PI * Math.round(difference / (2 * Math.PI));
        rows[row] = difference / dial.prior!.sigma;
        if (jacobian !== null) jacobian[row * size + column] = dial.slope(u) / dial.prior!.sigma;
      });
    },
    logSlopes(free, offset): number {
      return freeDials.reduce(
        (sum, dial, column) => sum + Math.log(Math.abs(dial.slope(free[offset + column]!))),
        0,
      );
    },
    fromElements(elements: RelativeElements, free: Float64Array, offset: number): void {
      const e = eccentricity.fixed ?? elements.eccentricity;
      const w = omega.fixed ?? elements.argPeriastronStarRad;
      const p = period.fixed ?? elements.periodDays;
      const passage = byPeriastron
        ? 0
        : conjunctionAnomaly(elements.eccentricity, elements.argPeriastronStarRad).meanAnomaly;
      let t = elements.timePeriastronDays + (passage * elements.periodDays) / (2 * Math.PI);
      const wanted = time.prior?.centre ?? (time.fixed === null && time.value(0) !== 0 ? time.value(0) : t);
      t += p * Math.round((wanted - t) / p);
      const all = [p, Math.min(0.99, Math.max(e, 1e-3)), w, t, Math.max(elements.semiAmplitudeMps, 1e-6)];
      dials.forEach((dial, d) => {
        if (dial.fixed === null) free[offset + columnOf[d]!] = dial.parameter(all[d]!);
      });
    },
  };
}

/** Mean anomaly at inferior conjunction (true anomaly 90 deg - omega) and its derivatives by e and omega. */
function conjunctionAnomaly(e: number, omega: number): { meanAnomaly: number; byE: number; byOmega: number } {
  const nu = Math.PI / 2 - omega;
  const eta = Math.sqrt((1 - e) * (1 + e));
  const c = Math.cos(nu);
  const s = Math.sin(nu);
  const eccentric = Math.atan2(eta * s, e + c);
  const meanAnomaly = eccentric - e * Math.sin(eccentric);
  const byNu = eta ** 3 / (1 + e * c) ** 2;
  const nuByE = (s * (2 + e * c)) / (eta * eta);
  return { meanAnomaly, byE: -nuByE * byNu, byOmega: -byNu };
}
