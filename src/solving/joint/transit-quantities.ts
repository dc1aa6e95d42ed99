/** Elements and derived quantities that a transit adds to a companion, evaluated at the best point and on every draw. */
import { companionMassSolar, massFunctionSolar } from '../../orbit/masses.js';
import { SOLAR_RADIUS_IN_JUPITER } from '../../orbit/constants.js';
import { meanDensityGramsPerCm3 } from '../../orbit/star-density.js';
import { surfaceGravityMps2 } from '../../orbit/transit-shape.js';
import type { StarDraw } from '../derived.js';
import { centralInterval, unknownQuantity } from '../quantities.js';
import {
  TRANSIT_DERIVED_UNITS,
  TRANSIT_ELEMENT_UNITS,
  type TransitDerivedKey,
  type TransitElementKey,
} from '../transit-types.js';
import type { Quantity } from '../types.js';
import type { JointValues } from './joint-values.js';

/** Boltzmann's constant over the atomic mass constant, J/(kg K): CODATA 2018. */
const GAS_CONSTANT_J_PER_KG_K = 8314.46261815324;
/** Hydrogen and helium in solar proportion. */
const MEAN_MOLECULAR_WEIGHT = 2.3;
const DEGREES = Math.PI / 180;

interface Given {
  readonly values: JointValues;
  readonly star: StarDraw;
  readonly index: number;
}

const ELEMENTS: Readonly<Record<TransitElementKey, (given: Given) => number>> = {
  inclination: (g) => g.values.transits[g.index]!.inclinationDeg,
  radiusRatio: (g) => g.values.transits[g.index]!.radiusRatio,
  scaledSemiMajorAxis: (g) => g.values.transits[g.index]!.scaledSemiMajorAxis,
  impactParameter: (g) => g.values.transits[g.index]!.impactParameter,
};

/** Elements that follow from a transit only with its period. */
const OF_PERIOD: readonly TransitElementKey[] = ['inclination', 'scaledSemiMajorAxis'];

type Need = 'starMass' | 'starRadius' | 'temperature' | 'velocities' | 'period';

interface Recipe {
  readonly needs: readonly Need[];
  compute(given: Given): number;
}

function radiusSolar({ values, star, index }: Given): number {
  return values.transits[index]!.radiusRatio * star.radiusSolar!;
}

function massSolar({ values, star, index }: Given): number {
  const elements = values.reported.companions[index]!;
  return companionMassSolar({
    massFunctionSolar: massFunctionSolar({
      periodDays: elements.period,
      semiAmplitudeMps: elements.semiAmplitude,
      eccentricity: elements.eccentricity,
    }),
    starMassSolar: star.massSolar!,
    sinInclination: Math.sin(values.transits[index]!.inclinationDeg * DEGREES),
  });
}

function gravityMps2({ values, index }: Given): number {
  const elements = values.reported.companions[index]!;
  const transit = values.transits[index]!;
  return surfaceGravityMps2({
    periodDays: elements.period,
    eccentricity: elements.eccentricity,
    semiAmplitudeMps: elements.semiAmplitude,
    companionRadiusOverAxis: transit.radiusRatio / transit.scaledSemiMajorAxis,
    sinInclination: Math.sin(transit.inclinationDeg * DEGREES),
  });
}

const DERIVED: Readonly<Record<TransitDerivedKey, Recipe>> = {
  radius: { needs: ['starRadius'], compute: (g) => radiusSolar(g) * SOLAR_RADIUS_IN_JUPITER },
  meanDensity: {
    needs: ['starMass', 'starRadius', 'velocities'],
    compute: (g) => meanDensityGramsPerCm3(massSolar(g), radiusSolar(g)),
  },
  surfaceGravity: { needs: ['velocities'], compute: gravityMps2 },
  totalDuration: { needs: [], compute: (g) => g.values.transits[g.index]!.totalDurationHours },
  fullDuration: { needs: [], compute: (g) => g.values.transits[g.index]!.fullDurationHours },
  midTransitDepth: { needs: [], compute: (g) => g.values.transits[g.index]!.midTransitDepthPpm },
  timeOfOccultation: {
    needs: ['period'],
    compute: (g) =>
      g.values.reported.companions[g.index]!.timeOfInferiorConjunction +
      g.values.transits[g.index]!.occultationLagDays,
  },
  scaleHeight: {
    needs: ['temperature', 'velocities', 'period'],
    compute(g) {
      const temperature =
        g.star.effectiveTemperatureK! / Math.sqrt(2 * g.values.transits[g.index]!.scaledSemiMajorAxis);
      return ((GAS_CONSTANT_J_PER_KG_K / MEAN_MOLECULAR_WEIGHT) * temperature) / gravityMps2(g) / 1000;
    },
  },
  rossiterMcLaughlin: {
    needs: [],
    compute({ values, index }) {
      const { radiusRatio, impactParameter } = values.transits[index]!;
      return 1000 * radiusRatio ** 2 * Math.sqrt(1 - impactParameter ** 2);
    },
  },
};

const WHY: Readonly<Record<Need, string>> = {
  starMass: 'the mass of the star is not given',
  starRadius: 'the radius of the star is not given',
  temperature: 'the effective temperature of the star is not given',
  velocities: 'no velocities show its pull',
  period: 'its period is not known',
};

/** What a companion's quantities are read from. */
export interface Reading {
  readonly index: number;
  readonly best: JointValues;
  readonly draws: readonly JointValues[];
  readonly star: StarDraw;
  readonly stars: readonly StarDraw[];
  readonly epochBjdTdb: number;
  /** Its pull is fitted to velocities. */
  readonly pulls: boolean;
  readonly isPeriodUnknown: boolean;
}

export function transitElements(reading: Reading): Record<TransitElementKey, Quantity> {
  const entries = (Object.keys(ELEMENTS) as TransitElementKey[]).map((key): [TransitElementKey, Quantity] => [
    key,
    reading.isPeriodUnknown && OF_PERIOD.includes(key)
      ? unknownQuantity(TRANSIT_ELEMENT_UNITS[key], WHY.period)
      : quantityOf(reading, TRANSIT_ELEMENT_UNITS[key], 0, ELEMENTS[key]),
  ]);
  return Object.fromEntries(entries) as Record<TransitElementKey, Quantity>;
}

export function transitDerived(reading: Reading): Record<TransitDerivedKey, Quantity> {
  const { star, pulls, isPeriodUnknown, epochBjdTdb } = reading;
  const has: Record<Need, boolean> = {
    starMass: star.massSolar !== null,
    starRadius: star.radiusSolar !== null,
    temperature: star.effectiveTemperatureK !== null,
    velocities: pulls,
    period: !isPeriodUnknown,
  };
  const entries = (Object.keys(DERIVED) as TransitDerivedKey[]).map((key): [TransitDerivedKey, Quantity] => {
    const recipe = DERIVED[key];
    const { needs } = recipe;
    const unit = TRANSIT_DERIVED_UNITS[key];
    const lacking = needs.filter((need) => !has[need]);
    if (lacking.length > 0) return [key, unknownQuantity(unit, lacking.map((need) => WHY[need]).join('; '))];
    const quantity = quantityOf(reading, unit, key === 'timeOfOccultation' ? epochBjdTdb : 0, (given) =>
      recipe.compute(given),
    );
    return [
      key,
      key === 'fullDuration' && quantity.value === null
        ? unknownQuantity(unit, 'the transit is grazing: the companion is never wholly in front of the star')
        : quantity,
    ];
  });
  return Object.fromEntries(entries) as Record<TransitDerivedKey, Quantity>;
}

function quantityOf(
  { index, best, draws, star, stars }: Reading,
  unit: string,
  shift: number,
  compute: (given: Given) => number,
): Quantity {
  const safely = (values: JointValues, ofStar: StarDraw): number => {
    try {
      return shift + compute({ values, star: ofStar, index });
    } catch {
      // Outside its domain for this draw.
      return NaN;
    }
  };
  return centralInterval(
    safely(best, star),
    Float64Array.from(draws, (values, d) => safely(values, stars[d]!)),
    unit,
  );
}
