/** What is recorded when the light curves show no transit: the velocities alone, or that there is nothing. */
import type { Observations } from '../../observations/photometry-types.js';
import type { Case } from '../../observations/types.js';
import { starQuantity } from '../describe-solution.js';
import { fixedQuantity, unknownQuantity } from '../quantities.js';
import { solveWithPosterior, type PosteriorSolveOptions } from '../solve-with-posterior.js';
import type { PhotometryRecord, SolvedPhotometry } from '../transit-types.js';
import type { SolutionRecord, Solved } from '../types.js';
import type { TransitSearch } from './found-transit.js';
import { inputsOf } from './joint-inputs.js';
import { emptyVelocitySet } from './joint-sampled.js';
import { refusedDips, wholeCurves } from './photometry-arrays.js';

export async function withoutTransits(
  theCase: Case,
  observations: Observations,
  search: TransitSearch,
  epochBjdTdb: number,
  options: PosteriorSolveOptions,
): Promise<Solved> {
  const { velocities, lightCurves } = observations;
  const warnings: SolutionRecord['warnings'] = [
    ...search.notices,
    {
      code: 'no-transit-found',
      message: `no transit was found in ${lightCurves.length === 1 ? 'the light curve' : `the ${lightCurves.length} light curves`}${explanation(theCase, search)}`,
    },
  ];
  const why = 'no transit was found';
  const record: PhotometryRecord = {
    detections: [],
    refused: refusedDips(search),
    lightCurves: [],
    bands: [],
    events: [],
    midTimes: [],
    starDensity: unknownQuantity('g/cm3', why),
    starDensityGiven: unknownQuantity('g/cm3', why),
    starDensityTension: null,
  };
  const photometry: SolvedPhotometry = {
    fitted: [],
    whole: wholeCurves(lightCurves, search),
    curves: [],
    midTimes: [],
    spectra: search.dips?.stages ?? [],
    vettings: [],
  };
  if (velocities !== null) {
    const solved = await solveWithPosterior(theCase, velocities, options);
    return {
      ...solved,
      record: {
        ...solved.record,
        photometry: record,
        warnings: [...warnings, ...solved.record.warnings],
        provenance: { ...solved.record.provenance, inputs: inputsOf(theCase, observations) },
      },
      photometry,
    };
  }
  return emptySolution(theCase, observations, epochBjdTdb, options, { warnings, record, photometry });
}

/** Why nothing was found, where more can be said than that. */
function explanation(theCase: Case, { dips }: TransitSearch): string {
  if (dips !== null) return '';
  const isStated =
    typeof theCase.companions === 'object' &&
    theCase.companions.some(
      ({ elements }) => elements.period !== undefined && elements.timeOfInferiorConjunction !== undefined,
    );
  return isStated
    ? ': no dip lies where the period and the time of inferior conjunction of the case put one'
    : ' (too short to be searched for periodic dips: a period and a time of inferior conjunction in the case would say where to look)';
}

/** Nothing found and nothing else to go by. */
function emptySolution(
  theCase: Case,
  observations: Observations,
  epochBjdTdb: number,
  options: PosteriorSolveOptions,
  found: {
    readonly warnings: SolutionRecord['warnings'];
    readonly record: PhotometryRecord;
    readonly photometry: SolvedPhotometry;
  },
): Solved {
  const timeScale =
    observations.lightCurves[0]?.timeScale ?? observations.midTimes[0]?.timeScale ?? 'BJD_TDB';
  const { star } = theCase;
  return {
    record: {
      schema: 'tugline/solution',
      version: 1,
      target: theCase.target,
      timeScale,
      epoch: epochBjdTdb,
      star: {
        mass: starQuantity(star.massSolar, 'M_sun'),
        radius: starQuantity(star.radiusSolar, 'R_sun'),
        effectiveTemperature: starQuantity(star.effectiveTemperatureK, 'K'),
      },
      companions: [],
      candidates: [],
      neighbours: [],
      velocity: {
        instruments: [],
        slope: fixedQuantity(0, 'm/s/yr'),
        curvature: fixedQuantity(0, 'm/s/yr^2'),
      },
      photometry: found.record,
      fit: {
        status: 'failed',
        reason: 'no companion was found, so that nothing was fitted',
        usable: false,
        logLikelihood: 0,
        chiSquare: 0,
        degreesOfFreedom: 0,
        freeParameters: 0,
        bic: 0,
        aicc: null,
        rms: 0,
        covariance: { names: [], matrix: [] },
      },
      posterior: null,
      assumptions: [],
      warnings: found.warnings,
      provenance: {
        program: 'tugline',
        version: options.provenance.version,
        node: options.provenance.node,
        seed: options.seed,
        command: options.provenance.command,
        inputs: inputsOf(theCase, observations),
      },
    },
    velocities: emptyVelocitySet(timeScale),
    best: {
      companions: [],
      letters: [],
      zeroPointsMps: new Float64Array(0),
      jittersMps: new Float64Array(0),
      epochBjdTdb,
      slopeMpsPerDay: 0,
      curvatureMpsPerDay2: 0,
    },
    residualsMps: new Float64Array(0),
    stages: [],
    window: { frequenciesPerDay: new Float64Array(0), power: new Float64Array(0), peaks: [] },
    posterior: null,
    photometry: found.photometry,
  };
}
