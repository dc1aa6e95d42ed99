/** Mid-times of several companions in; the ephemeris of each and the orbits that pull at each other out. */
import { ConvergenceError, InputDataError, UsageError, type InputIssue } from '../../errors.js';
import type { MidTimeTable } from '../../observations/photometry-types.js';
import { counted } from '../../observations/text.js';
import type { Measured } from '../../observations/types.js';
import { starQuantity } from '../describe-solution.js';
import { FEWEST_CYCLES, fitInteraction, MOST_COMPANIONS } from './interaction-fit.js';
import { interactionRecord } from './interaction-record.js';
import type { InteractionFit, InteractionTable } from './interaction-types.js';
import { solveTiming, type TimingChoices } from './solve-timing.js';
import type { SystemCompanionRecord, TimingSystemSolved } from './system-types.js';

export interface TimingSystemChoices extends Omit<
  TimingChoices,
  'periodDays' | 'starMassSolar' | 'onProgress'
> {
  readonly starMass: Measured | null;
  /** Periods that are known beforehand, by letter, good to 2 %. */
  readonly periodsDays: Readonly<Record<string, number>>;
  /** Uncertainties of the interaction from its curvature instead of draws. */
  readonly quick: boolean;
  readonly onProgress?: (stage: string, fraction: number) => void;
}

export interface CompanionTables {
  readonly letter: string;
  readonly tables: readonly MidTimeTable[];
}

type Solved = TimingSystemSolved['companions'][number];
type Warning = TimingSystemSolved['record']['warnings'][number];

/** Integrated predictions run on for this share of the span at least, and at most. */
const OUTLOOK = { least: 0.25, most: 2 };
/** Shares of the work. */
const ALONE = 0.3;
const TOGETHER = 0.94;

/**
 * @param given - two or more companions
 * @throws InputDataError for fewer than three times, wrong cycles, or cycles that cannot be counted: of all companions at once
 *
 * Where orbits cannot be fitted together the record says why, and each companion still has its ephemeris.
 */
export function solveTimingSystem(
  given: readonly CompanionTables[],
  choices: TimingSystemChoices,
): TimingSystemSolved {
  const progress = choices.onProgress ?? ((): void => undefined);
  const companions = solveEach(given, choices);
  const tables = companions.map(transitsOf);
  const warnings: Warning[] = companions.flatMap(({ letter, solved }) =>
    solved.record.data.occultations === 0
      ? []
      : [
          {
            code: 'occultations-not-integrated',
            message: `companion ${letter}: its occultations are in its own ephemeris, not in the interacting orbits, which are fitted to transits`,
          },
        ],
  );
  const untried = whyNotTried(tables);
  const tried = untried === null ? together(tables, choices, progress) : null;
  const fit = tried !== null && 'fit' in tried ? tried.fit : null;
  const why = untried ?? (tried !== null && 'why' in tried ? tried.why : null);
  const wanted = { afterDays: choices.afterBjdTdb, next: choices.next };
  const interaction = fit === null ? null : interactionRecord(fit, tables, wanted);
  if (why !== null)
    warnings.push({ code: 'interaction-not-fitted', message: `the orbits were not fitted together: ${why}` });
  if (interaction !== null) warnings.push(...predictionWarnings(interaction.predictions, tables, choices));
  const first = companions[0]!.solved.record;
  return {
    record: {
      schema: 'tugline/timing-system',
      version: 1,
      target: choices.target,
      timeScale: first.timeScale,
      star: { mass: starQuantity(choices.starMass, 'M_sun') },
      companions: companions.map(companionRecord),
      interaction,
      ...(why === null ? {} : { interactionWhy: why }),
      warnings,
      provenance: {
        ...first.provenance,
        inputs: companions.flatMap(({ solved }) => solved.record.provenance.inputs),
      },
    },
    companions,
    interaction: fit === null ? null : { fit, tables },
    hasFailed: untried === null && interaction?.usable !== true,
  };
}

function solveEach(given: readonly CompanionTables[], choices: TimingSystemChoices): Solved[] {
  const progress = choices.onProgress ?? ((): void => undefined);
  const { starMass: star, periodsDays, ...shared } = choices;
  const issues: InputIssue[] = [];
  const companions: Solved[] = [];
  given.forEach(({ letter, tables }, c) => {
    try {
      const solved = solveTiming(tables, {
        ...shared,
        periodDays: periodsDays[letter] ?? null,
        starMassSolar: star?.value ?? null,
        onProgress: (stage, share) => {
          progress(`companion ${letter}: ${stage}`, (ALONE * (c + share)) / given.length);
        },
      });
      companions.push({ letter, solved });
    } catch (error) {
      if (!(error instanceof InputDataError)) throw error;
      issues.push(...error.issues);
    }
  });
  if (issues.length > 0) throw new InputDataError(issues);
  return companions;
}

/** The mid-transits with the cycles that were settled. */
function transitsOf({ letter, solved: { rows } }: Solved): InteractionTable {
  const isTransit = (_: number, row: number): boolean => rows.isOccultation[row] === 0;
  return {
    letter,
    cycles: rows.cycles.filter(isTransit),
    timesDays: rows.timesBjdTdb.filter(isTransit),
    sigmasDays: rows.sigmasMinutes.filter(isTransit).map((sigma) => sigma / 1440),
  };
}

/** A reason that lies in the amount of data alone; `null` where the fit is to be tried. */
function whyNotTried(tables: readonly InteractionTable[]): string | null {
  if (tables.length > MOST_COMPANIONS)
    return `${tables.length} companions have mid-times, and at most ${MOST_COMPANIONS} can be integrated together`;
  const short = tables.flatMap(({ letter, cycles }) => {
    const different = new Set(Array.from(cycles)).size;
    return different < FEWEST_CYCLES
      ? [`companion ${letter} has mid-transits of ${counted(different, 'cycle')}`]
      : [];
  });
  return short.length === 0 ? null : `${short.join(', ')}, and ${FEWEST_CYCLES} of each are needed`;
}

function together(
  tables: readonly InteractionTable[],
  choices: TimingSystemChoices,
  progress: (stage: string, fraction: number) => void,
): { readonly fit: InteractionFit } | { readonly why: string } {
  const { starMass: star, quick, seed } = choices;
  try {
    const fit = fitInteraction(
      tables,
      star === null ? { massSolar: null } : { massSolar: star.value, massSolarSigma: star.sigma },
      {
        seed,
        ...(quick ? { draws: 0 } : {}),
        outlook: outlookOf(tables, choices),
        onProgress: (share, stage) => {
          progress(stage, ALONE + (TOGETHER - ALONE) * share);
        },
      },
    );
    return { fit };
  } catch (error) {
    if (error instanceof UsageError)
      return { why: error.hint === '' ? error.message : `${error.message}; ${error.hint}` };
    if (error instanceof ConvergenceError) return { why: error.message };
    throw error;
  }
}

/** Share of the longest span that the integration has to go on for the predictions that are wanted. */
function outlookOf(tables: readonly InteractionTable[], { afterBjdTdb, next }: TimingSystemChoices): number {
  const ends = tables.map(endsOf);
  const last = Math.max(...ends.map((end) => end.lastDays));
  const longest = Math.max(...ends.map((end) => end.lastDays - end.firstDays));
  const wanted = Math.max(
    ...ends.map((end) => (afterBjdTdb ?? end.lastDays) + (next + 1) * end.periodDays - last),
  );
  return Math.min(OUTLOOK.most, Math.max(OUTLOOK.least, wanted / longest));
}

function endsOf({ cycles, timesDays }: InteractionTable): {
  readonly firstDays: number;
  readonly lastDays: number;
  readonly periodDays: number;
} {
  const order = Array.from(timesDays, (_, row) => row).sort((a, b) => timesDays[a]! - timesDays[b]!);
  const [first, last] = [order[0]!, order[order.length - 1]!];
  const firstDays = timesDays[first]!;
  const lastDays = timesDays[last]!;
  return {
    firstDays,
    lastDays,
    periodDays: (lastDays - firstDays) / Math.max(1, cycles[last]! - cycles[first]!),
  };
}

/** Where fewer integrated predictions are given than were wanted. */
function predictionWarnings(
  predictions: readonly { readonly letter: string }[],
  tables: readonly InteractionTable[],
  { next }: TimingSystemChoices,
): Warning[] {
  const short = tables.filter(
    ({ letter }) => predictions.filter((prediction) => prediction.letter === letter).length < next,
  );
  if (short.length === 0) return [];
  return [
    {
      code: 'predictions-cut',
      message: `companion${short.length === 1 ? '' : 's'} ${short.map(({ letter }) => letter).join(', ')}: fewer than ${next} predictions from the integrated orbits, which are carried on for at most ${OUTLOOK.most} times the span of the data`,
    },
  ];
}

function companionRecord({ letter, solved: { record } }: Solved): SystemCompanionRecord {
  const { data, numbering, referenceCycle, models, notTried, preferred, reasons } = record;
  const { predictions, outliers, assumptions, warnings } = record;
  return {
    letter,
    data,
    numbering,
    referenceCycle,
    models,
    notTried,
    preferred,
    reasons,
    predictions,
    outliers,
    assumptions,
    warnings,
  };
}
