/** What one more companion is worth: thresholds, and the evidence weighed by velocities, by nights, and without one night. */
import { byLikelihood, type Explorer, type PlannedFit } from './explorer.js';
import {
  powerOfGain,
  shapeFalseAlarm,
  sinusoidFalseAlarm,
  weightedVariance,
  type FalseAlarmSetting,
} from './false-alarm.js';
import { withoutCarryingNight } from './influence.js';
import { nightlySupport } from './nightly.js';
import { gainWithNoiseFree } from './noise-free-gain.js';
import { backgroundOf } from './search-stage.js';

/** Thresholds a companion must clear, and the weaker ones of a candidate. */
export const ACCEPTED = { falseAlarmProbability: 1e-3, deltaBic: 10 } as const;
export const CANDIDATE = { falseAlarmProbability: 1e-2, deltaBic: 5 } as const;

/** Share of the false-alarm budget given to sinusoids; the rest goes to eccentric shapes. */
const SINUSOID_SHARE = 0.8;

export interface Addition {
  readonly planned: PlannedFit;
  readonly deltaLogLikelihood: number;
  readonly deltaBic: number;
  readonly falseAlarmProbability: number;
  /** Why evidence that looks sufficient is not, in words; `null` where there is nothing to say. */
  readonly refusal: string | null;
}

type Strength = Omit<Addition, 'planned'>;

interface Variants {
  readonly circular: PlannedFit | null;
  readonly eccentric: PlannedFit | null;
}

export function clears(
  addition: Pick<Addition, 'falseAlarmProbability' | 'deltaBic'>,
  thresholds: { falseAlarmProbability: number; deltaBic: number },
): boolean {
  return (
    addition.falseAlarmProbability < thresholds.falseAlarmProbability &&
    addition.deltaBic > thresholds.deltaBic
  );
}

/** Evidence of an addition over the model without it; where nights hold several velocities, the weaker of two countings. */
export function measure(
  explorer: Explorer,
  base: PlannedFit,
  top: PlannedFit,
  fits: readonly PlannedFit[],
): Addition {
  const bestOf = (circular: boolean): PlannedFit | null =>
    [top, ...fits]
      .filter(
        (planned) =>
          planned.plan.companions.at(-1)!.circular === circular && planned.plan.drift <= base.plan.drift,
      )
      .sort(byLikelihood)[0] ?? null;
  const variants = { circular: bestOf(true), eccentric: bestOf(false) };
  const evidence = evidenceFromFits(explorer, base, top, variants);
  return { planned: top, ...evidence };
}

/**
 * Gains of `top` over `base`, and the false-alarm probability of the better of a sinusoid and an eccentric shape; the weakest
 * of what all velocities, each night once, and all nights but one say.
 */
export function evidenceFromFits(
  explorer: Explorer,
  base: PlannedFit,
  top: PlannedFit,
  variants: Variants,
): Strength {
  return withoutOneNight(explorer, base, top, variants, nightlyEvidence(explorer, base, top, variants));
}

function nightlyEvidence(
  explorer: Explorer,
  base: PlannedFit,
  top: PlannedFit,
  variants: Variants,
): Strength {
  const setting = falseAlarmSettingOf(explorer, base);
  const every = {
    deltaLogLikelihood: top.fit.logLikelihood - base.fit.logLikelihood,
    deltaBic: base.fit.bic - top.fit.bic,
    falseAlarmProbability: sharedFalseAlarm(
      gainWithNoiseFree(base, variants.circular),
      gainWithNoiseFree(base, variants.eccentric),
      setting,
    ),
    refusal: null,
  };
  const nightly = nightlySupport(explorer, base, top);
  if (nightly === null) return every;
  const nightlyGain = (planned: PlannedFit | null): number =>
    planned === null || planned.fit.status === 'failed'
      ? 0
      : gainWithNoiseFree(nightly.base, nightly.explorer.fit(planned.plan, explorer.portable(planned)));
  const alarm = sharedFalseAlarm(
    nightlyGain(variants.circular),
    nightlyGain(variants.eccentric),
    falseAlarmSettingOf(nightly.explorer, nightly.base),
  );
  const counted = {
    deltaLogLikelihood: every.deltaLogLikelihood,
    deltaBic: Math.min(every.deltaBic, nightly.deltaBic),
    falseAlarmProbability: Math.max(every.falseAlarmProbability, alarm),
  };
  const isRefused = clears(every, ACCEPTED) && !clears(counted, ACCEPTED);
  return { ...counted, refusal: isRefused ? 'it does not survive when each night counts once' : null };
}

/** Evidence with the night left out that carries most of it; unchanged where it stands without that night. */
function withoutOneNight(
  explorer: Explorer,
  base: PlannedFit,
  top: PlannedFit,
  variants: Variants,
  evidence: Strength,
): Strength {
  if (!clears(evidence, ACCEPTED)) return evidence;
  const reduced = withoutCarryingNight(explorer, base, top);
  if (reduced === null) return evidence;
  const gain = (planned: PlannedFit | null): number =>
    planned === null ? 0 : gainWithNoiseFree(reduced.base, reduced.fit(planned));
  const left = {
    falseAlarmProbability: sharedFalseAlarm(
      gain(variants.circular),
      gain(variants.eccentric),
      falseAlarmSettingOf(reduced.explorer, reduced.base),
    ),
    deltaBic: reduced.base.fit.bic - reduced.fit(top).fit.bic,
  };
  if (clears(left, CANDIDATE)) return evidence;
  return { ...evidence, ...left, refusal: 'it rests on a single night: without it, nothing is left of it' };
}

/** False-alarm probability with the budget shared between sinusoids and eccentric shapes. */
function sharedFalseAlarm(circularGain: number, eccentricGain: number, setting: FalseAlarmSetting): number {
  const sinusoid = sinusoidFalseAlarm(powerOfGain(circularGain, setting.dataCount), setting) / SINUSOID_SHARE;
  const shape = shapeFalseAlarm(eccentricGain, setting) / (1 - SINUSOID_SHARE);
  return Math.min(1, sinusoid, shape);
}

/** What the false-alarm probability of one more companion on top of a fit depends on. */
export function falseAlarmSettingOf(explorer: Explorer, base: PlannedFit): FalseAlarmSetting {
  const background = backgroundOf(base.fit);
  const { grid } = explorer.range;
  return {
    dataCount: background.timesDays.length,
    backgroundCount: background.basis.length,
    bandwidthPerDay: (grid.count - 1) * grid.stepPerDay,
    timeVarianceDays2: weightedVariance(background.timesDays, background.weights),
  };
}
