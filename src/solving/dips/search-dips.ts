/** The search for dips in light curves: one companion after the other, with the dips of the earlier ones masked. */
import type { DipSpectrum } from '../transit-types.js';
import { BoxSearch } from './box-search.js';
import { periodicCandidate, singleCandidate, weighDip, type WeighedDip } from './candidate.js';
import { detrended, weightedSeries, type Detrended } from './detrend.js';
import { shortestDurationDays } from './duration-range.js';
import { detectionEfficiency, highestPeaks } from './efficiency.js';
import { strongestEvent } from './events.js';
import { isPartOf, judgePeriodic, judgeSingle, sameCompanion, type Verdict } from './judge.js';
import { namedBy, spectrumOf } from './dip-spectrum.js';
import { refineNear, refineTrapezoid } from './refine.js';
import { choosePeriod } from './related-periods.js';
import { durationBounds, searchSettings, type SearchSettings } from './search-settings.js';
import { loudestSingle } from './single-events.js';
import type { WeightedSeries } from './ticked-series.js';
import { distanceDays, type TrapezoidShape } from './trapezoid.js';
import { unseenNoiseFactor } from './unseen-noise.js';
import type { DipCandidate, DipData, DipSearch, DipSearchOptions, RejectedDip } from './types.js';

/** Peaks of a spectrum that are refined before noise is called noise. */
const PEAKS_REFINED = 3;
/** Peaks this close (relative) are one. */
const PEAKS_APART = 0.005;
/** Rejected dips that are masked, so that what hides behind them is found. */
const MOST_DISTRUSTED = 6;
/** A dip is masked with this share of its duration on either side. */
const MASK_MARGIN = 0.1;

export type DipProgress = (stage: string, fraction: number) => void;

/** What is masked so far, and the light curve without its trend. */
interface Hunt {
  readonly data: DipData;
  readonly settings: SearchSettings;
  readonly isMasked: Uint8Array;
  light: Detrended;
}

/** A dip that has been looked at, with the candidate that it makes. */
interface Verdicted {
  readonly verdict: Verdict;
  readonly candidate: DipCandidate;
  readonly weighed: WeighedDip;
}

/** @throws RangeError for fewer than two times or an empty range of periods */
export function searchDips(
  data: DipData,
  options: DipSearchOptions = {},
  progress: DipProgress = () => undefined,
): DipSearch {
  const settings = searchSettings(data, options);
  const isMasked = new Uint8Array(data.timesDays.length);
  const hunt: Hunt = { data, settings, isMasked, light: lightWithout(data, settings, isMasked) };
  const candidates: DipCandidate[] = [];
  const rejected: RejectedDip[] = [];
  const stages: DipSpectrum[] = [];
  /** What the accepted candidates mask, and what the distrusted ones do. */
  const shapes: TrapezoidShape[] = [];
  const shapesDistrusted: TrapezoidShape[] = [];
  let distrusted = 0;
  while (candidates.length < settings.most && distrusted < MOST_DISTRUSTED) {
    const said = candidates.length === 0 ? 'searching dips' : `searching dips, ${candidates.length} found`;
    const found = lookForPeriod(hunt, stages, candidates, (share) => {
      progress(said, (candidates.length + share) / (candidates.length + 1));
    });
    const dip = found?.verdict.kind === 'weak' || found === null ? (lookForSingle(hunt) ?? found) : found;
    if (dip === null) break;
    if (dip.verdict.kind === 'accepted') {
      const part = candidates.findIndex((other) => isPartOf(other, dip.candidate));
      const whole =
        part < 0
          ? null
          : joinedWith(
              hunt,
              dip,
              [...shapes.filter((_, i) => i !== part), ...shapesDistrusted],
              candidates.filter((_, i) => i !== part),
            );
      if (whole === null) candidates.push(dip.candidate);
      else {
        candidates[part] = whole.candidate;
        shapes[part] = whole.weighed.refined.shape;
        remask(hunt, [...shapes, ...shapesDistrusted]);
        continue;
      }
      shapes.push(dip.weighed.refined.shape);
    } else {
      shapesDistrusted.push(dip.weighed.refined.shape);
      rejected.push({ ...dip.candidate, why: dip.verdict.why });
      if (dip.verdict.kind === 'weak') break;
      distrusted++;
    }
    mask(hunt, dip.weighed.refined.shape, isMasked);
    hunt.light = lightWithout(data, settings, isMasked);
  }
  const { trend, isOutlier, errorScales } = hunt.light;
  return {
    candidates,
    rejected,
    stages,
    trend,
    isOutlier,
    settings: [
      ...((data.averaged ?? 1) > 1 ? [`points averaged by up to ${data.averaged}`] : []),
      ...settings.said,
      `errors of the tables scaled by ${errorScales.map((scale) => scale.toPrecision(3)).join(', ')}`,
    ],
  };
}

/** The light curve without its trend, which what is masked has no part in. */
function lightWithout(data: DipData, { windowDays, loneLow }: SearchSettings, masked: Uint8Array): Detrended {
  return detrended(data, masked, windowDays, loneLow);
}

/** Marks the dips of a shape. */
function mask(hunt: Hunt, shape: TrapezoidShape, isMasked: Uint8Array): void {
  const reach = (0.5 + MASK_MARGIN) * shape.durationDays + 0.5 * hunt.settings.spacingDays;
  hunt.data.timesDays.forEach((time, i) => {
    if (distanceDays(shape, time) <= reach) isMasked[i] = 1;
  });
}

/** Masks the dips of these shapes and no others, and takes the trend anew. */
function remask(hunt: Hunt, shapes: readonly TrapezoidShape[]): void {
  hunt.isMasked.fill(0);
  for (const shape of shapes) mask(hunt, shape, hunt.isMasked);
  hunt.light = lightWithout(hunt.data, hunt.settings, hunt.isMasked);
}

/** A dip with those of its every n-th event that an earlier candidate had taken; `null` where they do not belong together. */
function joinedWith(
  hunt: Hunt,
  dip: Verdicted,
  others: readonly TrapezoidShape[],
  accepted: readonly DipCandidate[],
): Verdicted | null {
  const before = hunt.isMasked.slice();
  remask(hunt, others);
  const series = weightedSeries(hunt.data.timesDays, hunt.light, hunt.isMasked);
  const { periodDays, durationDays, efficiency } = dip.candidate;
  const whole = lookAtPeriod(hunt, series, periodDays!, durationDays, efficiency ?? 0, accepted);
  const turns = whole === null ? NaN : whole.candidate.periodDays! / periodDays!;
  if (whole?.verdict.kind === 'accepted' && Math.abs(turns - 1) < 0.01) return whole;
  hunt.isMasked.set(before);
  return null;
}

/** The light curve again, with the dips of `shape` left out of the trend but not of the series. */
function seriesFor(hunt: Hunt, shape: TrapezoidShape): WeightedSeries {
  const masked = hunt.isMasked.slice();
  mask(hunt, shape, masked);
  return weightedSeries(hunt.data.timesDays, lightWithout(hunt.data, hunt.settings, masked), hunt.isMasked);
}

/** Red noise over the duration of a dip, everywhere else. */
function noiseFor(hunt: Hunt, shape: TrapezoidShape): number {
  const masked = hunt.isMasked.slice();
  mask(hunt, shape, masked);
  return unseenNoiseFactor(hunt.data, hunt.settings, masked, shape.durationDays);
}

/** The best of the first peaks of the spectrum, refined; `null` where no period can be searched or nothing dips. */
function lookForPeriod(
  hunt: Hunt,
  stages: DipSpectrum[],
  accepted: readonly DipCandidate[],
  onProgress: (share: number) => void,
): Verdicted | null {
  const { grid } = hunt.settings;
  if (grid === null) return null;
  const series = weightedSeries(hunt.data.timesDays, hunt.light, hunt.isMasked);
  const search = new BoxSearch(series, grid, 'joined', onProgress);
  const efficiency = detectionEfficiency(search.signalResidue);
  const peaks = highestPeaks(efficiency, grid.frequenciesPerDay, 10, PEAKS_APART);
  stages.push(spectrumOf(search, efficiency, peaks, accepted.length));
  let best: Verdicted | null = null;
  for (const index of refinedPeaks(search.signalResidue, efficiency, grid.frequenciesPerDay)) {
    const looked = lookAtPeak(hunt, series, search, index, efficiency[index]!, accepted);
    if (looked === null) continue;
    if (best === null || isBetter(looked, best)) best = looked;
  }
  if (best?.verdict.kind === 'accepted') {
    stages.push(namedBy(stages.pop()!, best.candidate.periodDays!));
    return best;
  }
  if (best?.verdict.kind !== 'one event') return best;
  return strongestAlone(hunt, best) ?? best;
}

/** A later peak must have this much more signal: small differences are those of noise and of few points in a dip. */
const MORE_SIGNAL = 1.3;

/**
 * Accepted before not accepted; among the accepted the one that stands out most of the spectrum, unless a later one has far more
 * signal: a fraction of a period may have lower neighbours to stand out of.
 */
function isBetter(a: Verdicted, b: Verdicted): boolean {
  const [isTaken, wasTaken] = [a.verdict.kind === 'accepted', b.verdict.kind === 'accepted'];
  const more = isTaken && wasTaken ? MORE_SIGNAL : 1;
  return isTaken === wasTaken ? a.candidate.signalToNoise > more * b.candidate.signalToNoise : isTaken;
}

/** Highest peaks by efficiency, and the highest by residue: long periods may stand low against their neighbours. */
function refinedPeaks(residue: Float64Array, efficiency: Float64Array, frequencies: Float64Array): number[] {
  const first = highestPeaks(efficiency, frequencies, PEAKS_REFINED, PEAKS_APART);
  return [...new Set([...first, ...highestPeaks(residue, frequencies, 1, PEAKS_APART)])];
}

function lookAtPeak(
  hunt: Hunt,
  series: WeightedSeries,
  search: BoxSearch,
  index: number,
  efficiency: number,
  accepted: readonly DipCandidate[],
): Verdicted | null {
  const peak = search.peakAt(index);
  return peak.depth > 0
    ? lookAtPeriod(hunt, series, peak.periodDays, peak.durationDays, efficiency, accepted)
    : null;
}

/** A period refined, weighed and judged. */
function lookAtPeriod(
  hunt: Hunt,
  series: WeightedSeries,
  periodDays: number,
  durationDays: number,
  efficiency: number,
  accepted: readonly DipCandidate[],
): Verdicted | null {
  const { settings } = hunt;
  const { range, spanDays, spacingDays } = settings;
  const width = Math.max(2 * shortestDurationDays(range, periodDays), durationDays) / spanDays;
  const bounds = durationBounds(range, periodDays);
  const first = refineNear(series, periodDays, width, bounds);
  if (first === null) return null;
  // Once more with the trend taken without these dips.
  const clean = seriesFor(hunt, first.shape);
  const second = refineNear(clean, first.shape.periodDays, 0.5 * width, bounds) ?? first;
  const weighed = weighDip(clean, second, spacingDays, noiseFor(hunt, second.shape));
  if (weighed.events.length === 0) return null;
  const { chosen, related } = choosePeriod(
    clean,
    weighed,
    spacingDays,
    spanDays,
    settings.shortestPeriodDays,
    (periodDays) => durationBounds(range, periodDays),
  );
  const verdict = judgePeriodic(chosen, efficiency, settings);
  const same = verdict.kind === 'weak' ? null : sameCompanion(chosen.refined.shape, accepted, spanDays);
  return {
    verdict: same ?? verdict,
    candidate: periodicCandidate(clean, chosen, spacingDays, settings.volume, efficiency, related),
    weighed: chosen,
  };
}

/** Where a period rests on one event: that event by itself. */
function strongestAlone(hunt: Hunt, looked: Verdicted): Verdicted | null {
  const event = strongestEvent(looked.weighed.events);
  return judgedSingle(hunt, event.midTimeDays, looked.candidate.durationDays);
}

/** The most significant event at any time; `null` unless it is significant. */
function lookForSingle(hunt: Hunt): Verdicted | null {
  const series = weightedSeries(hunt.data.timesDays, hunt.light, hunt.isMasked);
  const box = loudestSingle(series, hunt.settings);
  const judged = box === null ? null : judgedSingle(hunt, box.midTimeDays, box.durationDays);
  return judged?.verdict.kind === 'weak' ? null : judged;
}

function judgedSingle(hunt: Hunt, midTimeDays: number, durationDays: number): Verdicted | null {
  const { spacingDays, singleBounds, singleVolume } = hunt.settings;
  const shape = { periodDays: Infinity, midTimeDays, durationDays, slopeShare: 0 };
  const series = seriesFor(hunt, shape);
  const refined = refineTrapezoid(series, Infinity, midTimeDays, durationDays, singleBounds);
  if (refined === null) return null;
  const weighed = weighDip(series, refined, spacingDays, noiseFor(hunt, refined.shape));
  if (weighed.events.length === 0) return null;
  return {
    verdict: judgeSingle(weighed, hunt.settings),
    candidate: singleCandidate(series, weighed, spacingDays, singleVolume),
    weighed,
  };
}
