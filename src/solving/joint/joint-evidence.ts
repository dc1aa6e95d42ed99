/** What speaks for a companion in a joint solution. */
import { regularisedGammaQ } from '../../numerics/special-functions.js';
import type { Evidence } from '../types.js';
import type { JointResult } from './joint-result.js';
import { dataCount, fitFrom } from './joint-fit.js';
import { RADIUS_RATIO } from './natural.js';

/** Parameters of a transit at a known ephemeris: radius ratio, impact parameter, density of the star. */
const SHAPE_PARAMETERS = 3;
/** Those of its ephemeris. */
const EPHEMERIS_PARAMETERS = 2;
/** Method of the evidence where the table of mid-times is taken at its word. */
export const MID_TIMES_ONLY = 'none: its mid-times are taken at their word';
/** A companion this small leaves no trace. */
const NO_RADIUS = 1e-4;

/** For companions seen in light curves the gain of the transits; for the others what velocities alone say. */
export function jointEvidence(result: JointResult, index: number, ofVelocities: Evidence | null): Evidence {
  const { settled } = result;
  const companion = settled.companions[index]!;
  const { transits, occultation } = settled.fit.recipe.companions[index]!;
  if (!transits) return ofVelocities ?? withoutData();
  const deltaLogLikelihood = settled.fit.maximum.value - withoutTransit(result, index);
  const candidate = companion.found?.candidate ?? null;
  const parameters =
    SHAPE_PARAMETERS + (candidate === null ? 0 : EPHEMERIS_PARAMETERS) + (occultation ? 1 : 0);
  const other = settled.otherShapes[index] ?? null;
  // Without an ephemeris the dip may lie anywhere: as many places as there are points.
  const trials = companion.found?.how === 'one event' ? dataCount(settled.fit.recipe) : 1;
  return {
    deltaLogLikelihood,
    deltaBic: 2 * deltaLogLikelihood - parameters * Math.log(dataCount(settled.fit.recipe)),
    falseAlarmProbability:
      candidate?.falseAlarmProbability ??
      Math.min(1, trials * regularisedGammaQ(0.5 * SHAPE_PARAMETERS, Math.max(0, deltaLogLikelihood))),
    falseAlarmMethod:
      candidate === null
        ? trials > 1
          ? 'chance that white noise gains as much anywhere in the light curve (χ² with 3 degrees of freedom, as many trials as points)'
          : 'chance that noise gains as much at a known ephemeris (χ² with 3 degrees of freedom)'
        : 'search for dips in the light curves: trials of the search times the tail of the folded signal to noise, red noise counted',
    marginal: ofVelocities?.marginal ?? null,
    eccentricity:
      other === null
        ? (ofVelocities?.eccentricity ?? null)
        : {
            deltaLogLikelihood:
              (companion.circular ? 1 : -1) * (other.maximum.value - settled.fit.maximum.value),
            deltaBic: (companion.circular ? 1 : -1) * (settled.fit.bic - other.bic),
            lucySweeneyProbability: ofVelocities?.eccentricity?.lucySweeneyProbability ?? null,
            marginal: null,
            eccentricFit: ofVelocities?.eccentricity?.eccentricFit ?? null,
          },
  };
}

/** ln L of the best fit in which this companion casts no shadow. */
function withoutTransit({ settled }: JointResult, index: number): number {
  const { recipe, natural } = settled.fit;
  const companions = recipe.companions.map((companion, c) =>
    c === index
      ? {
          ...companion,
          choice: {
            letter: companion.letter,
            circular: companion.circular,
            elements: companion.choice?.elements ?? {},
            inclinationDeg: null,
            transit: { radiusRatio: { kind: 'fixed' as const, value: NO_RADIUS } },
          },
        }
      : companion,
  );
  const start = Float64Array.from(natural);
  start[settled.fit.density.coordinates.index.companion(index) + RADIUS_RATIO] = NO_RADIUS;
  return fitFrom({ ...recipe, companions }, start)?.maximum.value ?? -Infinity;
}

/** Mid-times say when, not whether. */
function withoutData(): Evidence {
  return {
    deltaLogLikelihood: 0,
    deltaBic: 0,
    falseAlarmProbability: 1,
    falseAlarmMethod: MID_TIMES_ONLY,
    marginal: null,
    eccentricity: null,
  };
}
