/** Whether a companion rests on a single night of one instrument: a wrong velocity can look like a swing through periastron. */
import type { VelocityData } from '../signals/velocity-term.js';
import type { Explorer, PlannedFit } from './explorer.js';
import { nightsOf } from './nightly.js';
import { residualsOf } from './residuals.js';

/** The question is asked when one night carries more than this share of what the companion gains. */
const CARRYING_SHARE = 0.35;

export interface WithoutNight {
  readonly explorer: Explorer;
  readonly base: PlannedFit;
  fit(planned: PlannedFit): PlannedFit;
}

/**
 * Data and model without the night that gains most from `top`; `null` when no night carries an undue share.
 *
 * @param base - the model without the companion
 */
export function withoutCarryingNight(
  explorer: Explorer,
  base: PlannedFit,
  top: PlannedFit,
): WithoutNight | null {
  const { data } = explorer.builder;
  const { nightOf, count } = nightsOf(data);
  const before = residualsOf(base.fit);
  const after = residualsOf(top.fit);
  if (before === null || after === null) return null;
  const gains = new Float64Array(count);
  let total = 0;
  for (let i = 0; i < nightOf.length; i++) {
    const jitter = top.fit.point.jittersMps[data.instrumentOf[i]!]!;
    const gain = (before[i]! ** 2 - after[i]! ** 2) / (data.sigmasMps[i]! ** 2 + jitter * jitter);
    gains[nightOf[i]!]! += gain;
    total += gain;
  }
  const night = gains.indexOf(Math.max(...gains));
  if (gains[night]! < CARRYING_SHARE * total) return null;
  const kept = Array.from(nightOf, (_, i) => i).filter((i) => nightOf[i] !== night);
  if (kept.length < 6) return null;
  const others = explorer.withData(rowsOf(data, kept));
  return {
    explorer: others,
    base: others.fit(base.plan, explorer.portable(base)),
    fit: (planned) => others.fit(planned.plan, explorer.portable(planned)),
  };
}

function rowsOf(data: VelocityData, rows: readonly number[]): VelocityData {
  return {
    timesDays: Float64Array.from(rows, (i) => data.timesDays[i]!),
    velocitiesMps: Float64Array.from(rows, (i) => data.velocitiesMps[i]!),
    sigmasMps: Float64Array.from(rows, (i) => data.sigmasMps[i]!),
    instrumentOf: Uint16Array.from(rows, (i) => data.instrumentOf[i]!),
    instrumentCount: data.instrumentCount,
  };
}
