/** Which companions transit, and when: from mid-times, from the case, and from the light curves themselves. */
import { InputDataError } from '../../errors.js';
import { companionLetter } from '../../observations/letters.js';
import type { LightCurveTable, MidTimeTable, Observations } from '../../observations/photometry-types.js';
import type { Case, ElementChoice } from '../../observations/types.js';
import { dipDataOf } from '../dips/dip-data.js';
import { searchDips } from '../dips/search-dips.js';
import { statedDensityGcc } from '../dips/search-tables.js';
import type { DipCandidate, DipData, DipSearch } from '../dips/types.js';
import { numberCycles } from '../timing/cycles.js';
import { mergeMidTimes, type MidTimes } from '../timing/timing-data.js';
import { straightLine, type FoundTransit, type NumberedSet, type TransitSearch } from './found-transit.js';
import { dipOfEphemeris } from './event-dips.js';
import { nightTransits } from './night-transits.js';

/** Light curves shorter than this are nights on a known target: nothing periodic is searched in them alone. */
const SURVEY_DAYS = 1.5;
/** Phases of two ephemerides of the same companion agree within this many durations. */
const SAME_WITHIN_DURATIONS = 1;

interface Known {
  readonly letter: string | null;
  readonly periodDays: number;
  readonly periodSigmaDays: number;
  readonly midTimeDays: number;
  readonly midTimeSigmaDays: number;
  readonly how: 'mid-times' | 'case';
}

export function searchTransits(
  theCase: Case,
  observations: Observations,
  epochBjdTdb: number,
  progress: (stage: string, fraction: number) => void,
): TransitSearch {
  const { lightCurves, midTimes } = observations;
  const notices: { code: string; message: string }[] = [];
  const surveys = lightCurves.filter(
    (table) => table.used > 50 && table.timesBjdTdb.at(-1)! - table.timesBjdTdb[0]! > SURVEY_DAYS,
  );
  const data = surveys.length === 0 ? null : dipDataOf(surveys, epochBjdTdb);
  const dips = data === null ? null : searchSurveys(theCase, data, progress);
  const sets = numberedSets(theCase, midTimes, epochBjdTdb, dips?.candidates ?? [], notices);
  const known = [...sets.map((set) => knownFromSet(set)), ...knownFromCase(theCase, epochBjdTdb, sets)];
  const unmatched = new Set<DipCandidate>(dips?.candidates ?? []);
  const transits: FoundTransit[] = [];
  for (const ephemeris of known) {
    const candidate = [...unmatched].find((other) => isSame(other, ephemeris)) ?? null;
    if (candidate !== null) unmatched.delete(candidate);
    transits.push(knownTransit(ephemeris, candidate, lightCurves, epochBjdTdb, transits.length, theCase));
  }
  for (const candidate of unmatched) transits.push(searchedTransit(candidate, transits.length, theCase));
  if (transits.length === 0 && dips === null) {
    const letter = letterOf(theCase, 0);
    const nights = nightTransits(lightCurves, epochBjdTdb, letter, statedPeriod(theCase, letter));
    transits.push(...nights.transits);
    notices.push(...nights.notices);
  }
  return {
    transits: transits.slice(0, 20),
    sets,
    dips,
    surveyed: surveys.map(({ name }) => name),
    searched: data,
    notices,
  };
}

/** Mid-times of each companion, numbered: with a stated period, or else with that of a dip whose transits they are. */
function numberedSets(
  theCase: Case,
  tables: readonly MidTimeTable[],
  epochBjdTdb: number,
  candidates: readonly DipCandidate[],
  notices: { code: string; message: string }[],
): NumberedSet[] {
  const letters = [...new Set(tables.map((table) => table.companion ?? 'b'))].sort();
  return letters.flatMap((letter) => {
    const own = tables.filter((table) => (table.companion ?? 'b') === letter);
    const merged = mergeMidTimes(own);
    notices.push(...merged.notices);
    const stated = statedPeriod(theCase, letter);
    if (merged.times.count < 2) throw tooFewMidTimes(own);
    const periodDays = stated ?? periodOfDip(merged.times, epochBjdTdb, candidates);
    const numbering = numberCycles(merged.times, { periodDays, renumber: false });
    notices.push(...numbering.notices);
    const shift = numbering.times.originBjdTdb - epochBjdTdb;
    return [{ letter, times: numbering.times, line: straightLine(numbering.times, shift) }];
  });
}

function tooFewMidTimes([first]: readonly MidTimeTable[]): InputDataError {
  return new InputDataError([
    {
      code: 'too-few-mid-times',
      file: first?.path ?? '',
      line: null,
      column: null,
      field: null,
      message: 'one mid-time gives no ephemeris',
      hint: 'add mid-times, or give the light curve itself',
    },
  ]);
}

function statedPeriod(theCase: Case, letter: string): number | null {
  const choice = listed(theCase).find((other) => other.letter === letter)?.elements.period;
  return choice === undefined ? null : centreOf(choice);
}

/** Period of the dip at whose transits all mid-times lie; `null` where there is no such dip or its ephemeris does not reach so far. */
function periodOfDip(
  times: MidTimes,
  epochBjdTdb: number,
  candidates: readonly DipCandidate[],
): number | null {
  for (const { periodDays, periodSigmaDays, midTimeDays, midTimeSigmaDays, durationDays } of candidates) {
    if (periodDays === null) continue;
    const isOwn = Array.from(times.timesDays).every((time, row) => {
      if (times.isOccultation[row] === 1) return true;
      const turns = (time + times.originBjdTdb - epochBjdTdb - midTimeDays) / periodDays;
      const cycles = Math.round(turns);
      const error = Math.hypot(midTimeSigmaDays, cycles * (periodSigmaDays ?? 0), times.sigmasDays[row]!);
      const slack = 0.5 * durationDays + 4 * error;
      return slack < 0.25 * periodDays && Math.abs(turns - cycles) * periodDays < slack;
    });
    if (isOwn) return periodDays;
  }
  return null;
}

function listed(theCase: Case): Exclude<Case['companions'], 'auto' | number> {
  return typeof theCase.companions === 'object' ? theCase.companions : [];
}

function centreOf(choice: ElementChoice): number {
  return choice.kind === 'range' ? 0.5 * (choice.low + choice.high) : choice.value;
}

function sigmaOf(choice: ElementChoice): number {
  return choice.kind === 'range'
    ? 0.3 * (choice.high - choice.low)
    : choice.kind === 'prior'
      ? choice.sigma
      : 0;
}

function knownFromSet({ letter, line }: NumberedSet): Known {
  return {
    letter,
    periodDays: line.periodDays,
    periodSigmaDays: line.periodSigmaDays,
    midTimeDays: line.timeDays + line.periodDays * line.middleCycle,
    midTimeSigmaDays: line.middleSigmaDays,
    how: 'mid-times',
  };
}

/** Companions of which the case states period and conjunction, unless mid-times speak of them. */
function knownFromCase(theCase: Case, epochBjdTdb: number, sets: readonly NumberedSet[]): Known[] {
  return listed(theCase).flatMap(({ letter, elements }) => {
    const { period, timeOfInferiorConjunction: conjunction } = elements;
    if (period === undefined || conjunction === undefined) return [];
    if (sets.some((set) => set.letter === letter)) return [];
    return [
      {
        letter,
        periodDays: centreOf(period),
        periodSigmaDays: sigmaOf(period),
        midTimeDays: centreOf(conjunction) - epochBjdTdb,
        midTimeSigmaDays: sigmaOf(conjunction),
        how: 'case' as const,
      },
    ];
  });
}

function searchSurveys(
  theCase: Case,
  data: DipData,
  progress: (stage: string, fraction: number) => void,
): DipSearch {
  const wanted = typeof theCase.companions === 'number' ? theCase.companions : theCase.maximumCompanions;
  return searchDips(
    data,
    {
      shortestPeriodDays: theCase.periodRangeDays.low,
      longestPeriodDays: theCase.periodRangeDays.high,
      starDensityGcc: statedDensityGcc(theCase),
      maximumCompanions: Math.max(1, wanted),
    },
    progress,
  );
}

/** Whether a dip of the search is the companion of an ephemeris. */
function isSame(candidate: DipCandidate, known: Known): boolean {
  const cycles = Math.round((candidate.midTimeDays - known.midTimeDays) / known.periodDays);
  const off = candidate.midTimeDays - known.midTimeDays - cycles * known.periodDays;
  const slack =
    SAME_WITHIN_DURATIONS * candidate.durationDays +
    3 * (known.midTimeSigmaDays + Math.abs(cycles) * known.periodSigmaDays);
  if (Math.abs(off) > Math.min(slack, 0.25 * known.periodDays)) return false;
  if (candidate.periodDays === null) return true;
  const ratio = candidate.periodDays / known.periodDays;
  return Math.abs(ratio - 1) < 0.01;
}

function letterOf(theCase: Case, index: number): string {
  return listed(theCase)[index]?.letter ?? companionLetter(index);
}

function knownTransit(
  known: Known,
  candidate: DipCandidate | null,
  lightCurves: readonly LightCurveTable[],
  epochBjdTdb: number,
  place: number,
  theCase: Case,
): FoundTransit {
  const dip =
    candidate === null
      ? dipOfEphemeris(lightCurves, epochBjdTdb, known)
      : { midTimeDays: candidate.midTimeDays, durationDays: candidate.durationDays, depth: candidate.depth };
  return {
    ephemeris: {
      letter: known.letter ?? letterOf(theCase, place),
      periodDays: known.periodDays,
      midTimeDays: known.midTimeDays,
      durationDays: dip?.durationDays ?? 0,
      depth: dip?.depth ?? 0,
      occultationLagDays: null,
    },
    how: known.how,
    periodSigmaDays: known.periodSigmaDays,
    midTimeSigmaDays: known.midTimeSigmaDays,
    shortestPeriodDays: known.periodDays,
    candidate,
    isSeen: dip !== null,
  };
}

function searchedTransit(candidate: DipCandidate, place: number, theCase: Case): FoundTransit {
  return {
    ephemeris: {
      letter: letterOf(theCase, place),
      periodDays: candidate.periodDays ?? statedPeriod(theCase, letterOf(theCase, place)),
      midTimeDays: candidate.midTimeDays,
      durationDays: candidate.durationDays,
      depth: candidate.depth,
      occultationLagDays: null,
    },
    how: candidate.kind === 'single' ? 'one event' : 'search',
    periodSigmaDays: candidate.periodSigmaDays,
    midTimeSigmaDays: candidate.midTimeSigmaDays,
    shortestPeriodDays: candidate.shortestPeriodDays,
    candidate,
    isSeen: true,
  };
}
