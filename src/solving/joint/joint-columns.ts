/** Everything that varies in a joint model as named numbers in the units of `solution.json`. */
import { MINUTES_PER_DAY } from '../../orbit/constants.js';
import type { ElementKey, PosteriorColumn, PosteriorDraws } from '../types.js';
import { ELEMENT_UNITS } from '../uncertainties.js';
import { TRANSIT_ELEMENT_UNITS, type TransitElementKey } from '../transit-types.js';
import type { JointDensity } from './joint-density.js';
import type { JointSample } from './joint-posterior.js';
import { jointValues, type JointValues, type References } from './joint-values.js';

export interface JointReading {
  readonly key: string;
  readonly unit: string;
  /** 360 for angles, else 0. */
  readonly cycle: number;
  /** Fitted, not derived from what is fitted. */
  readonly isFitted: boolean;
  read(values: JointValues): number;
}

/** @param instruments - names in the order of the velocity model */
export function jointReadings(
  density: JointDensity,
  letters: readonly string[],
  instruments: readonly string[],
  epochBjdTdb: number,
): JointReading[] {
  const { recipe } = density;
  const { index } = density.coordinates;
  const natural = (key: string, unit: string, at: number, scale = 1): JointReading => ({
    key,
    unit,
    cycle: 0,
    isFitted: true,
    read: (values) => scale * values.natural[at]!,
  });
  const readings = recipe.companions.flatMap((companion, c): JointReading[] => {
    const element = (key: ElementKey, isFitted: boolean): JointReading => ({
      key: `companions.${letters[c]!}.elements.${key}`,
      unit: ELEMENT_UNITS[key],
      cycle: key === 'argumentOfPeriastron' ? 360 : 0,
      isFitted,
      read: (values) => (key.startsWith('timeOf') ? epochBjdTdb : 0) + values.reported.companions[c]![key],
    });
    const transit = (key: TransitElementKey, isFitted: boolean): JointReading => ({
      key: `companions.${letters[c]!}.elements.${key}`,
      unit: TRANSIT_ELEMENT_UNITS[key],
      cycle: 0,
      isFitted,
      read: (values) =>
        key === 'inclination' ? values.transits[c]!.inclinationDeg : values.transits[c]![key],
    });
    return [
      // What one lone event leaves open shows its prior, not the data.
      ...(companion.isPeriodUnknown ? [] : [element('period', true)]),
      element('timeOfInferiorConjunction', true),
      ...(companion.circular
        ? []
        : [
            element('eccentricity', true),
            element('argumentOfPeriastron', true),
            element('timeOfPeriastron', false),
          ]),
      ...(companion.pulls ? [element('semiAmplitude', true)] : []),
      ...(companion.transits
        ? [
            transit('radiusRatio', true),
            transit('impactParameter', true),
            ...(companion.isPeriodUnknown
              ? []
              : [transit('scaledSemiMajorAxis', true), transit('inclination', false)]),
          ]
        : []),
    ];
  });
  recipe.bands.forEach((band, b) => {
    readings.push(
      natural(`photometry.bands.${band.name}.u1`, '', index.band(b)),
      natural(`photometry.bands.${band.name}.u2`, '', index.band(b) + 1),
    );
    recipe.companions.forEach((companion, c) => {
      if (companion.occultation)
        readings.push(
          natural(
            `photometry.bands.${band.name}.occultationDepth.${letters[c]!}`,
            'ppm',
            index.occultationDepth(c, b),
            1e6,
          ),
        );
    });
  });
  recipe.curves.forEach((curve, i) => {
    const key = `photometry.lightCurves.${curve.name}`;
    readings.push(
      natural(`${key}.jitter`, 'ppm', index.curveJitter(i), 1e6),
      natural(`${key}.dilution`, '', index.dilution(i)),
    );
    if (curve.noise === 'correlated')
      readings.push(
        natural(`${key}.correlatedNoise.amplitude`, 'ppm', index.correlatedNoise(i), 1e6),
        natural(`${key}.correlatedNoise.timescale`, 'd', index.correlatedNoise(i) + 1),
      );
  });
  instruments.forEach((name, i) => {
    readings.push(
      natural(`velocity.instruments.${name}.zeroPoint`, 'm/s', index.zeroPoint(i)),
      natural(`velocity.instruments.${name}.jitter`, 'm/s', index.velocityJitter(i)),
    );
  });
  const drift = ['velocity.slope', 'velocity.curvature'];
  drift.slice(0, recipe.drift).forEach((key, d) => {
    readings.push({
      key,
      unit: d === 0 ? 'm/s/yr' : 'm/s/yr^2',
      cycle: 0,
      isFitted: true,
      read: ({ reported }) => (d === 0 ? reported.slopeMpsPerYear : reported.curvatureMpsPerYear2),
    });
  });
  recipe.midTimes.forEach((set, i) => {
    readings.push(
      natural(
        `photometry.midTimes.${letters[set.companion]!}.jitter`,
        'min',
        index.midTimeJitter(i),
        MINUTES_PER_DAY,
      ),
    );
  });
  return readings;
}

/** Covariance of what was fitted, from the draws; `names` as in the record. */
export function drawnCovariance(
  readings: readonly JointReading[],
  best: JointValues,
  draws: readonly JointValues[],
): { names: string[]; matrix: number[][] } {
  const fitted = readings.filter((reading) => reading.isFitted);
  const columns = fitted.map((reading) => {
    const { cycle } = reading;
    const centre = reading.read(best);
    return Float64Array.from(draws, (values) => {
      const off = reading.read(values) - centre;
      return cycle > 0 ? off - cycle * Math.round(off / cycle) : off;
    });
  });
  const varying = fitted.flatMap((_, j) =>
    columns[j]!.some((value) => value !== columns[j]![0]) ? [j] : [],
  );
  const n = draws.length;
  const means = columns.map((column) => column.reduce((sum, value) => sum + value, 0) / Math.max(1, n));
  const matrix = varying.map((a) =>
    varying.map((b) => {
      let sum = 0;
      for (let d = 0; d < n; d++) sum += (columns[a]![d]! - means[a]!) * (columns[b]![d]! - means[b]!);
      return sum / Math.max(1, n - 1);
    }),
  );
  return {
    names: varying.map((j) => fitted[j]!.key.replace('.elements.', '.')),
    matrix: n > 1 ? matrix : [],
  };
}

/** All draws as columns; what never varies is left out. */
export function jointPosteriorDraws(
  sample: JointSample,
  readings: readonly JointReading[],
  best: JointValues,
  references: References,
): PosteriorDraws {
  const { density, chains, drawsPerChain, logDensities } = sample;
  const { size } = density;
  const total = chains.length * drawsPerChain;
  const values = readings.map(() => new Float64Array(total));
  chains.forEach((positions, chain) => {
    for (let d = 0; d < drawsPerChain; d++) {
      const point = jointValues(density, positions.subarray(d * size, (d + 1) * size), references);
      readings.forEach((reading, k) => (values[k]![chain * drawsPerChain + d] = reading.read(point)));
    }
  });
  const columns = readings.flatMap((reading, k): PosteriorColumn[] => {
    const { key, unit, cycle } = reading;
    const own = values[k]!;
    if (own.every((value) => value === own[0])) return [];
    if (cycle > 0) {
      const centre = reading.read(best);
      for (let i = 0; i < own.length; i++) own[i]! -= cycle * Math.round((own[i]! - centre) / cycle);
    }
    return [{ key, unit, values: own, cycle }];
  });
  const logDensity = new Float64Array(total);
  logDensities.forEach((own, chain) => {
    logDensity.set(own, chain * drawsPerChain);
  });
  return { chains: chains.length, drawsPerChain, columns, logDensity };
}
