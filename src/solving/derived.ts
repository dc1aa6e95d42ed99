/**
 * Quantities that follow from the elements and the star, each with what it needs. Evaluated at the best point and on
 * every draw (of elements, star mass, radius, temperature, inclination), so that uncertainties propagate by the draws.
 */
import { SOLAR_MASS_IN_JUPITER, SOLAR_RADIUS_IN_JUPITER, TWO_PI } from '../orbit/constants.js';
import {
  astrometricSignatureMicroarcsec,
  centralTransitDurationHours,
  equilibriumTemperatureK,
  hillRadiusAu,
  irradiationEarth,
  transitDepthPpm,
  transitProbability,
} from '../orbit/environment.js';
import { apastronDistanceAu, periastronDistanceAu, speedAtDistanceKmps } from '../orbit/geometry.js';
import {
  companionMassSolar,
  massFunctionSolar,
  relativeSemiMajorAxisAu,
  starOrbitSemiMajorAxisAu,
} from '../orbit/masses.js';
import type { ElementValues } from './elements-report.js';
import type { DerivedKey } from './types.js';

/** Star (and inclination) of one draw; null where the case does not say. */
export interface StarDraw {
  readonly massSolar: number | null;
  readonly radiusSolar: number | null;
  readonly effectiveTemperatureK: number | null;
  readonly inclinationDeg: number | null;
}

export interface DerivedInput {
  readonly elements: ElementValues;
  readonly star: StarDraw;
  /** Days since the solver's epoch, of the last observation. */
  readonly lastObservationDays: number;
}

interface Intermediate extends DerivedInput {
  readonly massFunction: number;
  /** m sin i solved with i = 90 deg; null without a star mass. */
  readonly minimumMassSolar: number | null;
  readonly semiMajorAxisAu: number | null;
}

type Need = 'starMass' | 'starRadius' | 'temperature' | 'inclination';

interface Recipe {
  readonly unit: string;
  readonly needs: readonly Need[];
  readonly isTime?: true;
  compute(given: Intermediate): number;
}

const PARSECS_OF_SIGNATURE = 10;
/** A body of one Jupiter radius stands in where the radius is not known. */
const radiusRatio = (given: Intermediate): number => 1 / (given.star.radiusSolar! * SOLAR_RADIUS_IN_JUPITER);

function geometry(given: Intermediate): {
  semiMajorAxisAu: number;
  starRadiusSolar: number;
  eccentricity: number;
  argPeriastronStarRad: number;
  radiusRatio: number;
} {
  return {
    semiMajorAxisAu: given.semiMajorAxisAu!,
    starRadiusSolar: given.star.radiusSolar!,
    eccentricity: given.elements.eccentricity,
    argPeriastronStarRad: (given.elements.argumentOfPeriastron * TWO_PI) / 360,
    radiusRatio: radiusRatio(given),
  };
}

function irradiated(given: Intermediate): Parameters<typeof irradiationEarth>[0] {
  return {
    effectiveTemperatureK: given.star.effectiveTemperatureK!,
    starRadiusSolar: given.star.radiusSolar!,
    semiMajorAxisAu: given.semiMajorAxisAu!,
    eccentricity: given.elements.eccentricity,
  };
}

function distanceAndSpeed(given: Intermediate, distance: (a: number, e: number) => number): [number, number] {
  const d = distance(given.semiMajorAxisAu!, given.elements.eccentricity);
  return [d, speedAtDistanceKmps(given.semiMajorAxisAu!, given.elements.period, d)];
}

function nextAfter(time: number, period: number, after: number): number {
  return time + period * Math.max(0, Math.floor((after - time) / period) + 1);
}

const JUPITER_MASS = 'M_jup';

const RECIPES: Readonly<Record<DerivedKey, Recipe>> = {
  semiMajorAxis: { unit: 'au', needs: ['starMass'], compute: (g) => g.semiMajorAxisAu! },
  starOrbitSemiMajorAxis: {
    unit: 'au',
    needs: [],
    compute: ({ elements: e }) => starOrbitSemiMajorAxisAu(e.semiAmplitude, e.period, e.eccentricity),
  },
  massFunction: { unit: 'M_sun', needs: [], compute: (g) => g.massFunction },
  minimumMass: {
    unit: JUPITER_MASS,
    needs: ['starMass'],
    compute: (g) => g.minimumMassSolar! * SOLAR_MASS_IN_JUPITER,
  },
  mass: {
    unit: JUPITER_MASS,
    needs: ['starMass', 'inclination'],
    compute: (g) =>
      SOLAR_MASS_IN_JUPITER *
      companionMassSolar({
        massFunctionSolar: g.massFunction,
        starMassSolar: g.star.massSolar!,
        sinInclination: Math.sin((g.star.inclinationDeg! * TWO_PI) / 360),
      }),
  },
  periastronDistance: {
    unit: 'au',
    needs: ['starMass'],
    compute: (g) => distanceAndSpeed(g, periastronDistanceAu)[0],
  },
  apastronDistance: {
    unit: 'au',
    needs: ['starMass'],
    compute: (g) => distanceAndSpeed(g, apastronDistanceAu)[0],
  },
  periastronSpeed: {
    unit: 'km/s',
    needs: ['starMass'],
    compute: (g) => distanceAndSpeed(g, periastronDistanceAu)[1],
  },
  apastronSpeed: {
    unit: 'km/s',
    needs: ['starMass'],
    compute: (g) => distanceAndSpeed(g, apastronDistanceAu)[1],
  },
  nextInferiorConjunction: {
    unit: 'd',
    needs: [],
    isTime: true,
    compute: (g) => nextAfter(g.elements.timeOfInferiorConjunction, g.elements.period, g.lastObservationDays),
  },
  nextPeriastron: {
    unit: 'd',
    needs: [],
    isTime: true,
    compute: (g) => nextAfter(g.elements.timeOfPeriastron, g.elements.period, g.lastObservationDays),
  },
  transitProbability: {
    unit: '',
    needs: ['starMass', 'starRadius'],
    compute: (g) => transitProbability(geometry(g)),
  },
  transitDuration: {
    unit: 'h',
    needs: ['starMass', 'starRadius'],
    compute: (g) => centralTransitDurationHours(geometry(g), g.elements.period),
  },
  transitDepth: { unit: 'ppm', needs: ['starRadius'], compute: (g) => transitDepthPpm(radiusRatio(g)) },
  astrometricSignature: {
    unit: 'microarcsec',
    needs: [],
    compute: ({ elements: e }) =>
      astrometricSignatureMicroarcsec(
        starOrbitSemiMajorAxisAu(e.semiAmplitude, e.period, e.eccentricity),
        PARSECS_OF_SIGNATURE,
      ),
  },
  equilibriumTemperature: {
    unit: 'K',
    needs: ['starMass', 'starRadius', 'temperature'],
    compute: (g) => equilibriumTemperatureK(irradiated(g), 0),
  },
  irradiation: {
    unit: 'S_earth',
    needs: ['starMass', 'starRadius', 'temperature'],
    compute: (g) => irradiationEarth(irradiated(g)),
  },
  hillRadius: {
    unit: 'au',
    needs: ['starMass'],
    compute: (g) =>
      hillRadiusAu(g.semiMajorAxisAu!, g.elements.eccentricity, g.minimumMassSolar!, g.star.massSolar!),
  },
};

const WHY: Readonly<Record<Need, string>> = {
  starMass: 'the mass of the star is not given',
  starRadius: 'the radius of the star is not given',
  temperature: 'the effective temperature of the star is not given',
  inclination: 'the inclination is not known from velocities',
};

export function derivedUnit(key: DerivedKey): string {
  return RECIPES[key].unit;
}

/** `true` for dates, which are counted from the solver's epoch until they are reported. */
export function isDerivedTime(key: DerivedKey): boolean {
  return RECIPES[key].isTime === true;
}

/** Why a quantity cannot be had with this star, or null when it can. */
export function derivedLack(key: DerivedKey, star: StarDraw): string | null {
  const has: Record<Need, boolean> = {
    starMass: star.massSolar !== null,
    starRadius: star.radiusSolar !== null,
    temperature: star.effectiveTemperatureK !== null,
    inclination: star.inclinationDeg !== null,
  };
  const lacking = RECIPES[key].needs.filter((need) => !has[need]);
  return lacking.length === 0 ? null : lacking.map((need) => WHY[need]).join('; ');
}

/** All derived quantities of one draw; NaN where one cannot be had (see `derivedLack`) or has no value. */
export function deriveAll(input: DerivedInput, keys: readonly DerivedKey[]): number[] {
  const { elements, star } = input;
  const massFunction = massFunctionSolar({
    periodDays: elements.period,
    semiAmplitudeMps: elements.semiAmplitude,
    eccentricity: elements.eccentricity,
  });
  const minimumMassSolar =
    star.massSolar === null
      ? null
      : companionMassSolar({
          massFunctionSolar: massFunction,
          starMassSolar: star.massSolar,
          sinInclination: 1,
        });
  const semiMajorAxisAu =
    minimumMassSolar === null
      ? null
      : relativeSemiMajorAxisAu(star.massSolar! + minimumMassSolar, elements.period);
  const given: Intermediate = { ...input, massFunction, minimumMassSolar, semiMajorAxisAu };
  return keys.map((key) => {
    if (derivedLack(key, star) !== null) return NaN;
    try {
      return RECIPES[key].compute(given);
    } catch {
      // Outside its domain for this draw (an orbit inside the star has no transit).
      return NaN;
    }
  });
}
