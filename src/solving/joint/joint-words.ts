/** What a joint solution rests on, and what the user must know before believing it. */
import type { CompanionRecord, SolutionRecord } from '../types.js';
import type { PhotometryRecord } from '../transit-types.js';
import type { JointResult } from './joint-result.js';

type Warning = SolutionRecord['warnings'][number];

/** Densities that differ by more than this many of their common errors contradict each other. */
const DENSITY_TENSION = 3;
const ODD_EVEN_SIGMAS = 3;
/** A transit must improve the BIC by this much. */
const WEAK_GAIN = 10;
/** A secondary dip is named below this false-alarm probability. */
const SECONDARY_FALSE_ALARM = 1e-3;
/** Scatter of means over a transit against what white noise gives. */
const RED_NOISE = 1.5;

export function jointAssumptions({ settled, velocity, sample, theCase }: JointResult): string[] {
  const { recipe } = settled.fit;
  const hasTransits = recipe.companions.some(({ transits }) => transits);
  const sentences = [
    `Noise is Gaussian${recipe.curves.some(({ noise }) => noise === 'correlated') ? '; that of the light curves for which the case says so is correlated in time' : ' and without correlation in time'}.`,
    'The companions move on undisturbed Keplerian orbits: their pulls on each other are neglected.',
  ];
  if (hasTransits)
    sentences.push(
      'The star is a sphere with quadratic limb darkening and without spots, the companions are dark discs that do not cover each other; all companions share one mean density of the star, and their own mass is neglected in it.',
      'Coefficients of the baselines are integrated out of the likelihood, each run of points near an event having its own.',
      `Light time across the orbit is ${recipe.starRadiusLightDays > 0 ? 'counted from the transit on' : 'not counted, since the radius of the star is not given'}.`,
    );
  if (velocity === null && recipe.companions.some(({ circular }) => circular) && theCase.circular === 'auto')
    sentences.push('Orbits are taken as circular: a light curve alone does not tell their eccentricity.');
  sentences.push(
    'The reported point maximises the likelihood times the priors that the case states, whatever the other priors of the posterior.',
    sample.record === null
      ? 'Uncertainties come from the curvature of the posterior density at its maximum, carried to elements and derived quantities by draws.'
      : 'Uncertainties are those of the posterior.',
  );
  return sentences;
}

export function jointWarnings(
  result: JointResult,
  photometry: PhotometryRecord,
  companions: readonly CompanionRecord[],
): Warning[] {
  return [
    ...result.search.notices,
    ...statedInclinations(result),
    ...densityWarnings(photometry),
    ...shapeWarnings(companions),
    ...vettingWarnings(result),
    ...coverageWarnings(result, photometry),
    ...pullWarnings(photometry),
  ];
}

function statedInclinations({ settled }: JointResult): Warning[] {
  return settled.companions.flatMap(({ letter, choice }, c) =>
    settled.fit.recipe.companions[c]!.transits && choice !== null && choice.inclinationDeg !== null
      ? [
          {
            code: 'inclination-not-used',
            message: `companion ${letter}: its transit tells the inclination, and the one that the case states is not used`,
          },
        ]
      : [],
  );
}

function densityWarnings({ starDensity, starDensityGiven, starDensityTension }: PhotometryRecord): Warning[] {
  if (starDensityTension === null || starDensityTension < DENSITY_TENSION) return [];
  const text = (value: number | null): string => (value === null ? '?' : value.toPrecision(3));
  return [
    {
      code: 'star-density-contradicts',
      message: `the transits want a star of ${text(starDensity.value)} g/cm3, its given mass and radius mean ${text(starDensityGiven.value)} g/cm3 (${starDensityTension.toFixed(1)} sigma apart): the star's values, the assumed shape of the orbit, light of another star in the aperture, or the companion's nature may be wrong`,
    },
  ];
}

function shapeWarnings(companions: readonly CompanionRecord[]): Warning[] {
  return companions.flatMap(({ letter, elements, derived, evidence }): Warning[] => {
    const { period, impactParameter, radiusRatio } = elements;
    const warnings: Warning[] = [];
    if (period.value === null)
      warnings.push({
        code: 'period-unknown',
        message: `companion ${letter}: one transit only; its period is not known, and nothing that needs it is given. Velocities, a second transit, or period: in the case would tell it`,
      });
    const outer = impactParameter?.upper;
    const ratio = radiusRatio?.lower;
    if (typeof outer === 'number' && typeof ratio === 'number' && outer > 1 - ratio)
      warnings.push({
        code: 'grazing-transit',
        message: `companion ${letter}: the transit may be grazing; radius ratio and impact parameter are then tied to each other, and the radius is bounded by its prior`,
      });
    if (radiusRatio !== undefined && evidence.deltaBic < WEAK_GAIN)
      warnings.push({
        code: 'transit-not-supported',
        message: `companion ${letter}: its transits improve the BIC by ${evidence.deltaBic.toFixed(1)} only (${WEAK_GAIN} wanted); what they tell of it is hardly more than its priors`,
      });
    if (derived.radius !== undefined && derived.radius.value !== null && derived.radius.value > 2.5)
      warnings.push({
        code: 'large-companion',
        message: `companion ${letter}: a radius of ${derived.radius.value.toPrecision(3)} Jupiter radii is that of a star`,
      });
    return warnings;
  });
}

function vettingWarnings({ settled }: JointResult): Warning[] {
  return settled.companions.flatMap(({ letter, found }): Warning[] => {
    const candidate = found?.candidate ?? null;
    if (candidate === null) return [];
    const warnings: Warning[] = [];
    const { oddEven, secondary, redNoiseFactor } = candidate;
    if (oddEven !== null && oddEven.differenceSigmas > ODD_EVEN_SIGMAS)
      warnings.push({
        code: 'odd-even-depths',
        message: `companion ${letter}: odd and even transits differ in depth by ${oddEven.differenceSigmas.toFixed(1)} sigma; the true period may be twice as long, with two unequal eclipses`,
      });
    if (secondary !== null && secondary.falseAlarmProbability < SECONDARY_FALSE_ALARM)
      warnings.push({
        code: 'secondary-dip',
        message: `companion ${letter}: a second dip of ${(1e6 * secondary.depth).toFixed(0)} ppm at phase ${secondary.phase.toFixed(3)}: an occultation, or the eclipse of a binary`,
      });
    if (redNoiseFactor > RED_NOISE && settled.fit.recipe.curves.some(({ noise }) => noise === 'white'))
      warnings.push({
        code: 'red-noise',
        message: `companion ${letter}: means over a transit scatter ${redNoiseFactor.toFixed(1)} times as much as white noise would; set noise: correlated for the table in the case to allow for it`,
      });
    return warnings;
  });
}

function coverageWarnings(result: JointResult, photometry: PhotometryRecord): Warning[] {
  const { settled, observations } = result;
  const warnings: Warning[] = [];
  const unused = observations.lightCurves.filter(
    ({ name }) => !photometry.lightCurves.some((curve) => curve.name === name),
  );
  const lone = new Set(
    result.search.notices
      .filter(({ code }) => code === 'second-lone-transit')
      .map(({ message }) => message.split(':')[0]),
  );
  for (const { name } of unused.filter((table) => !lone.has(`light curve ${table.name}`)))
    warnings.push({
      code: 'light-curve-without-transit',
      message: `light curve ${name}: no transit falls on its points, so that it does not enter the fit`,
    });
  for (const { letter } of settled.companions.filter((_, c) => settled.fit.recipe.companions[c]!.transits)) {
    const own = photometry.events.filter((event) => event.letter === letter);
    if (own.length > 0 && own.every(({ midTime }) => midTime.value === null))
      warnings.push({
        code: 'no-whole-transit',
        message: `companion ${letter}: gaps cut every transit; its shape rests on parts of several`,
      });
  }
  return warnings;
}

/** Where the companions' pull on each other is more than a mid-time's error, the ephemeris of this solution is not the whole truth. */
function pullWarnings({ interaction }: PhotometryRecord): Warning[] {
  if (interaction === undefined) return [];
  const { letters, predictedAmplitudeMinutes, comparisons } = interaction;
  return letters.flatMap((letter): Warning[] => {
    const amplitude = predictedAmplitudeMinutes[letter]?.value ?? null;
    const comparison = comparisons[letter];
    if (amplitude === null || comparison === undefined || amplitude <= comparison.medianErrorMinutes)
      return [];
    const others = letters.filter((other) => other !== letter).join(' and ');
    return [
      {
        code: 'pull-shifts-mid-times',
        message: `companion ${letter}: the pull of ${others} should move its mid-times by ${amplitude.toPrecision(2)} min to either side within these data, and the usual error of a mid-time is ${comparison.medianErrorMinutes.toPrecision(2)} min: undisturbed orbits no longer suffice, its period and epoch are less certain than stated, and its shape may be smeared; tugline timing with the mid-times of ${letters.join(' and ')} fits orbits that pull at each other`,
      },
    ];
  });
}
