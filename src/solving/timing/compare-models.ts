/** Which model the times ask for, by stated thresholds. */
import type { TimingModelName } from './model-forms.js';
import type { TimingModelRecord } from './types.js';

/** BIC by which a model must be better than every simpler one. */
export const BIC_THRESHOLD = 10;
/** A sinusoid must be so unlikely to come from noise: its BIC knows nothing of the frequencies tried. */
const FALSE_ALARM_THRESHOLD = 0.001;

export interface Verdict {
  readonly preferred: TimingModelName;
  readonly reasons: readonly string[];
}

function isEligible(model: TimingModelRecord): boolean {
  if (model.caution !== null) return false;
  return model.falseAlarmProbability === null || model.falseAlarmProbability < FALSE_ALARM_THRESHOLD;
}

function short(value: number): string {
  return Math.abs(value) < 100 ? value.toFixed(1) : value.toFixed(0);
}

/**
 * The simplest model that no other betters by 10 in BIC. Models with a caution, and sinusoids that noise gives as often as
 * 0.1 %, are shown but never preferred.
 *
 * @param models - the linear one first
 */
export function verdictOn(models: readonly TimingModelRecord[]): Verdict {
  const linear = models[0]!;
  const eligible = models.filter((model) => model === linear || isEligible(model));
  const lowest = eligible.reduce((best, model) => (model.bic < best.bic ? model : best));
  const near = eligible.filter((model) => model.bic < lowest.bic + BIC_THRESHOLD);
  const preferred = near.reduce((simplest, model) => {
    if (model.freeParameters !== simplest.freeParameters)
      return model.freeParameters < simplest.freeParameters ? model : simplest;
    return model.bic < simplest.bic ? model : simplest;
  });
  const reasons: string[] = [];
  if (preferred === linear)
    reasons.push(
      models.length === 1
        ? 'The linear model is the only one that these times can carry.'
        : `The linear model is preferred: no other is better by ${BIC_THRESHOLD} in BIC${models.some((model) => !eligible.includes(model) && model.bic < linear.bic - BIC_THRESHOLD) ? ' and determined' : ''}.`,
    );
  else {
    const factor = preferred.logBayesFactor;
    reasons.push(
      `The ${preferred.name} model is preferred over the linear one by ${short(linear.bic - preferred.bic)} in BIC` +
        `${factor === null ? '' : ` (ln of the Bayes factor ${short(factor)})`}; ${BIC_THRESHOLD} are asked for.`,
    );
  }
  for (const model of models) {
    if (model === preferred || model === linear) continue;
    const gain = preferred.bic - model.bic;
    if (model.caution !== null)
      reasons.push(`The ${model.name} model was fitted but cannot be preferred: ${model.caution}.`);
    else if (!isEligible(model))
      reasons.push(
        `The best sinusoid has a false-alarm probability of ${percent(model.falseAlarmProbability ?? 1)}; below 0.1 % is asked for.`,
      );
    else if (Math.abs(gain) < BIC_THRESHOLD)
      reasons.push(
        `The ${model.name} model is not ruled out: its BIC is ${gain > 0 ? `lower by ${short(gain)}` : `higher by ${short(-gain)}`}, less than ${BIC_THRESHOLD}.`,
      );
  }
  return { preferred: preferred.name, reasons };
}

function percent(probability: number): string {
  return probability >= 1e-4
    ? `${Number((100 * probability).toPrecision(2))} %`
    : probability.toExponential(0);
}
