/** Which block samples which natural parameter, as the case and the data ask. */
import { upperMedian } from '../../numerics/summary.js';
import type { ElementChoice } from '../../observations/types.js';
import { dialBlock, fixedBlock, type Block, type Dial, type PriorUse } from './block.js';
import { crossingBlock } from './crossing-block.js';
import {
  gaussianDial,
  logarithmicDial,
  mirroredDial,
  rangeDial,
  scatterDial,
  statedDial,
  uniformDial,
} from './dials.js';
import type { CurveData, JointCompanion, JointRecipe } from './joint-data.js';
import {
  AMPLITUDE,
  CONJUNCTION,
  LOG_PERIOD,
  NaturalIndex,
  RADIUS_RATIO,
  RELATIVE_IMPACT,
  SHAPE,
} from './natural.js';
import { shapeBlock, statedShapeBlock, triangleBlock } from './pair-blocks.js';
import { timeOfPeriastronBlock } from './periastron-block.js';

/** Radius ratios searched; a companion larger than this is a star of its own. */
export const SMALLEST_RATIO = 1e-3;
export const LARGEST_RATIO = 2;
/** g/cm3: from giants to white dwarfs. */
const DENSITY_RANGE = [1e-5, 1e4] as const;
const FEWEST_FOR_JITTER = 3;
const RADIANS = Math.PI / 180;

export function blocksOf(recipe: JointRecipe, index: NaturalIndex, use: PriorUse): Block[] {
  const blocks = recipe.companions.flatMap((companion, c) =>
    companionBlocks(recipe, companion, index.companion(c), use),
  );
  if (recipe.companions.some((companion) => companion.transits)) {
    const density = recipe.starDensityGcc;
    const target = index.logStarDensity;
    const dial =
      density === null
        ? uniformDial(Math.log(DENSITY_RANGE[0]), Math.log(DENSITY_RANGE[1]))
        : // A Gaussian of the density, whose relative error is small: one of its logarithm.
          gaussianDial(Math.log(density.value), Math.max(1e-4, density.sigma / density.value));
    const first = recipe.companions.findIndex((companion) => companion.transits);
    blocks.push(crossingBlock(dial, target, index.companion(first)));
  }
  recipe.bands.forEach((band, b) => {
    const target = index.band(b);
    if (band.u1 === null && band.u2 === null) blocks.push(triangleBlock(target, use));
    else
      [band.u1, band.u2].forEach((stated, j) => {
        if (stated === null) blocks.push(dialBlock(uniformDial(-1, 2), target + j));
        else if (stated.sigma > 0)
          blocks.push(dialBlock(gaussianDial(stated.value, stated.sigma), target + j));
        else blocks.push(fixedBlock(stated.value, target + j));
      });
  });
  recipe.companions.forEach((companion, c) => {
    recipe.bands.forEach((_, b) => {
      const target = index.occultationDepth(c, b);
      blocks.push(companion.occultation ? dialBlock(uniformDial(-1, 1), target) : fixedBlock(0, target));
    });
  });
  recipe.curves.forEach((curve, i) => blocks.push(...curveBlocks(curve, i, index, use)));
  blocks.push(...velocityBlocks(recipe, index, use));
  recipe.midTimes.forEach((set, i) => {
    const target = index.midTimeJitter(i);
    if (set.timesDays.length < FEWEST_FOR_JITTER + 1) {
      blocks.push(fixedBlock(0, target));
      return;
    }
    const typical = upperMedian(set.sigmasDays)!;
    blocks.push(dialBlock(scatterDial(0.3 * typical, 1000 * typical), target));
  });
  return blocks;
}

function companionBlocks(
  recipe: JointRecipe,
  companion: JointCompanion,
  base: number,
  use: PriorUse,
): Block[] {
  const { choice } = companion;
  const stated = choice?.elements ?? {};
  const blocks: Block[] = [periodBlock(companion, stated.period, base + LOG_PERIOD, use)];
  if (companion.circular) blocks.push(fixedBlock(0, base + SHAPE), fixedBlock(0, base + SHAPE + 1));
  else if (stated.eccentricity === undefined && stated.argumentOfPeriastron === undefined)
    blocks.push(shapeBlock(base + SHAPE, use));
  else blocks.push(statedShape(stated.eccentricity, stated.argumentOfPeriastron, base + SHAPE, use));
  // The phase comes after period and shape: a stated time of periastron needs them.
  const phase = stated.timeOfInferiorConjunction;
  const halfPeriod = 0.5 * companion.longestPeriodDays;
  if (stated.timeOfPeriastron !== undefined)
    blocks.push(timeOfPeriastronBlock(stated.timeOfPeriastron, recipe.epochBjdTdb, companion, base));
  else if (phase === undefined)
    blocks.push(
      dialBlock(
        uniformDial(companion.conjunctionDays - halfPeriod, companion.conjunctionDays + halfPeriod),
        base + CONJUNCTION,
      ),
    );
  else blocks.push(choiceBlock(shifted(phase, -recipe.epochBjdTdb), base + CONJUNCTION, false, use));
  const { scales } = recipe;
  if (companion.pulls && scales !== null) {
    const target = base + AMPLITUDE;
    blocks.push(
      stated.semiAmplitude === undefined
        ? dialBlock(
            logarithmicDial(
              1e-4 * scales.amplitudeScaleMps,
              scales.largestAmplitudeMps,
              scales.amplitudeScaleMps,
              use,
            ),
            target,
          )
        : choiceBlock(stated.semiAmplitude, target, true, use),
    );
  } else blocks.push(fixedBlock(0, base + AMPLITUDE));
  if (companion.transits) {
    const ratio = choice?.transit?.radiusRatio;
    blocks.push(
      ratio === undefined
        ? dialBlock(logarithmicDial(SMALLEST_RATIO, LARGEST_RATIO, 0, use), base + RADIUS_RATIO)
        : choiceBlock(ratio, base + RADIUS_RATIO, true, use),
      dialBlock(mirroredDial(1, use), base + RELATIVE_IMPACT),
    );
  } else blocks.push(fixedBlock(0, base + RADIUS_RATIO), fixedBlock(0, base + RELATIVE_IMPACT));
  return blocks;
}

function shifted(choice: ElementChoice, by: number): ElementChoice {
  return choice.kind === 'range'
    ? { ...choice, low: choice.low + by, high: choice.high + by }
    : { ...choice, value: choice.value + by };
}

function choiceBlock(choice: ElementChoice, target: number, isPositive: boolean, use: PriorUse): Block {
  const dial = statedDial(choice, isPositive, use);
  return dial === null || choice.kind === 'fixed'
    ? fixedBlock((choice as { value: number }).value, target)
    : dialBlock(dial, target);
}

/** The period is sampled by its logarithm, whatever is stated of it. */
function periodBlock(
  companion: JointCompanion,
  choice: ElementChoice | undefined,
  target: number,
  use: PriorUse,
): Block {
  const low = Math.log(companion.shortestPeriodDays);
  const high = Math.log(companion.longestPeriodDays);
  if (choice === undefined && use === 'stated' && companion.nominalPeriodDays !== null)
    return fixedBlock(Math.log(companion.nominalPeriodDays), target);
  if (choice === undefined)
    // Without an ephemeris the whole range is possible, and its ends are reached.
    return dialBlock(companion.isPeriodUnknown ? rangeDial(low, high, use) : uniformDial(low, high), target);
  if (choice.kind === 'fixed') return fixedBlock(Math.log(choice.value), target);
  if (choice.kind === 'range')
    return dialBlock(uniformDial(Math.log(choice.low), Math.log(choice.high)), target);
  const { value, sigma } = choice;
  const dial: Dial = {
    isMirrored: false,
    logNormalisation: Math.log((sigma / value) * Math.sqrt(2 * Math.PI)),
    value: (u) => u,
    slope: () => 1,
    logPrior: (u) => -0.5 * ((Math.exp(u) - value) / sigma) ** 2,
    logPriorSlope: (u) => (-(Math.exp(u) - value) * Math.exp(u)) / (sigma * sigma),
    position: (logPeriod) => logPeriod,
  };
  return dialBlock(dial, target);
}

/** Brings an angle next to a stated one. */
function nearAngle(dial: Dial, centreRad: number): Dial {
  return {
    ...dial,
    position: (value) => dial.position(value + 2 * Math.PI * Math.round((centreRad - value) / (2 * Math.PI))),
  };
}

function statedShape(
  eccentricity: ElementChoice | undefined,
  argumentDeg: ElementChoice | undefined,
  target: number,
  use: PriorUse,
): Block {
  const e =
    eccentricity === undefined
      ? rangeDial(0, 0.98, use)
      : eccentricity.kind === 'fixed'
        ? eccentricity.value
        : eccentricity.kind === 'prior'
          ? positiveEccentricity(eccentricity.value, eccentricity.sigma)
          : statedDial(eccentricity, false, use)!;
  if (argumentDeg === undefined) return statedShapeBlock(target, e, uniformDial(-1e3, 1e3));
  if (argumentDeg.kind === 'fixed') return statedShapeBlock(target, e, argumentDeg.value * RADIANS);
  const inRadians: ElementChoice =
    argumentDeg.kind === 'range'
      ? { kind: 'range', low: argumentDeg.low * RADIANS, high: argumentDeg.high * RADIANS }
      : { kind: 'prior', value: argumentDeg.value * RADIANS, sigma: argumentDeg.sigma * RADIANS };
  const centre =
    inRadians.kind === 'range'
      ? 0.5 * (inRadians.low + inRadians.high)
      : (inRadians as { value: number }).value;
  return statedShapeBlock(target, e, nearAngle(statedDial(inRadians, false, use)!, centre));
}

/** A Gaussian of e, cut at 0 and 1 by the domain. */
function positiveEccentricity(value: number, sigma: number): Dial {
  return { ...gaussianDial(value, sigma), position: (e) => Math.min(0.97, Math.max(1e-4, e)) };
}

function curveBlocks(curve: CurveData, i: number, index: NaturalIndex, use: PriorUse): Block[] {
  const { jitter, dilution, typicalSigma, scatter, noise } = curve;
  const jitterTarget = index.curveJitter(i);
  const span = curve.timesDays[curve.timesDays.length - 1]! - curve.timesDays[0]!;
  const step = usualStep(curve.timesDays);
  return [
    jitter === null
      ? dialBlock(scatterDial(0.3 * typicalSigma, 30 * scatter + 100 * typicalSigma), jitterTarget)
      : choiceBlock(jitter, jitterTarget, true, use),
    dilution.sigma > 0
      ? dialBlock(
          {
            ...gaussianDial(dilution.value, dilution.sigma),
            position: (u) => Math.min(0.99, Math.max(0, u)),
          },
          index.dilution(i),
        )
      : fixedBlock(dilution.value, index.dilution(i)),
    ...(noise === 'correlated'
      ? [
          dialBlock(
            logarithmicDial(1e-3 * typicalSigma, 30 * scatter, 0.3 * typicalSigma, use),
            index.correlatedNoise(i),
          ),
          // From a few exposures to the span: shorter is white noise, longer is the baseline's part.
          dialBlock(
            logarithmicDial(3 * step, Math.max(span, 10 * step), 0, use),
            index.correlatedNoise(i) + 1,
          ),
        ]
      : [fixedBlock(0, index.correlatedNoise(i)), fixedBlock(1, index.correlatedNoise(i) + 1)]),
  ];
}

function usualStep(timesDays: Float64Array): number {
  const steps = timesDays.subarray(1).map((time, i) => time - timesDays[i]!);
  return Math.max(1e-6, upperMedian(steps) ?? 1e-3);
}

function velocityBlocks(recipe: JointRecipe, index: NaturalIndex, use: PriorUse): Block[] {
  const { velocities, scales, drift } = recipe;
  if (velocities === null || scales === null)
    return [fixedBlock(0, index.drift), fixedBlock(0, index.drift + 1)];
  const blocks: Block[] = [];
  for (let i = 0; i < velocities.instrumentCount; i++) {
    const zeroPoint = recipe.zeroPoints[i] ?? null;
    if (zeroPoint !== null) blocks.push(choiceBlock(zeroPoint, index.zeroPoint(i), false, use));
    else {
      const own = velocities.velocitiesMps.filter((_, row) => velocities.instrumentOf[row] === i);
      const centre = upperMedian(own) ?? 0;
      const half = scales.zeroPointHalfWidthMps;
      blocks.push(dialBlock(uniformDial(centre - half, centre + half), index.zeroPoint(i)));
    }
  }
  const slopes = [scales.slopeHalfWidthMpsPerDay, scales.curvatureHalfWidthMpsPerDay2];
  slopes.forEach((half, d) => {
    blocks.push(
      drift > d ? dialBlock(uniformDial(-half, half), index.drift + d) : fixedBlock(0, index.drift + d),
    );
  });
  for (let i = 0; i < velocities.instrumentCount; i++) {
    const jitter = recipe.velocityJitters[i] ?? null;
    const target = index.velocityJitter(i);
    if (jitter !== null) blocks.push(choiceBlock(jitter, target, true, use));
    else if (recipe.velocityCounts[i]! < FEWEST_FOR_JITTER) blocks.push(fixedBlock(0, target));
    else blocks.push(dialBlock(scatterDial(scales.jitterScaleMps, scales.largestJitterMps), target));
  }
  return blocks;
}
