/**
 * tugline as a library: the way from tables to a dossier, for scripts of your own. Nothing here prints, asks or exits; what goes
 * wrong is thrown as one of the errors at the end.
 *
 * ```js
 * import { caseFromTables, formatQuantity, gatherObservations, readAnyTables, solveObservations } from 'tugline';
 *
 * const theCase = caseFromTables(['data-samples/north.csv', 'data-samples/south.csv'], {
 *   target: 'Vellamo',
 *   starMass: '0.94 +- 0.03 M_sun',
 * });
 * const observations = gatherObservations(await readAnyTables(theCase.tables));
 * const { record } = await solveObservations(theCase, observations, {
 *   seed: 1,
 *   quick: true,
 *   permutations: 0,
 *   threads: 0,
 *   drawLimit: 10_000,
 *   provenance: { version: '0.1.0', node: process.version, command: ['vellamo.mjs'] },
 * });
 * for (const { letter, elements, derived } of record.companions)
 *   console.log(letter, formatQuantity(elements.period, 'text'), formatQuantity(derived.minimumMass, 'text'));
 * ```
 *
 * Tables of velocities, light curves and mid-times go in together; each is told by what is in it (`requestFor` states what a
 * table does not say). `solveCase` and `solveWithPosterior` are the same for velocities alone.
 *
 * Times are BJD in TDB, velocities m/s and positive when the star recedes, flux relative to the star out of transit; the argument
 * of periastron is that of the star's orbit.
 */

// Tables and cases: from files to everything observed of one target
export {
  asBjdTdb,
  caseFromTables,
  checkChoices,
  checkInstrumentChoices,
  combineTables,
  describeLightCurve,
  describeMidTimes,
  describeTable,
  gatherObservations,
  parseAnyTable,
  parseCase,
  parseTable,
  readAnyTable,
  readAnyTables,
  readCase,
  readTable,
  readTables,
  requestFor,
} from './observations/index.js';
export type {
  AnyTable,
  BandChoice,
  BareCaseOptions,
  BjdTdb,
  Case,
  CompanionChoice,
  ElementChoice,
  InstrumentChoice,
  LightCurveChoice,
  LightCurveSummary,
  LightCurveTable,
  Measured,
  MidTimeChoice,
  MidTimeSummary,
  MidTimeTable,
  MockPlan,
  Observations,
  TableContent,
  TableNotice,
  TableRequest,
  TableSummary,
  TimeScale,
  TransitChoice,
  VelocitySet,
  VelocityTable,
} from './observations/index.js';

// The main job: companions, orbits, masses and radii, from any mix of velocities, light curves and mid-times
export { solveObservations } from './solving/joint/solve-observations.js';
export { solveCase } from './solving/solve-case.js';
export type { SolveOptions } from './solving/solve-case.js';
export { solveWithPosterior } from './solving/solve-with-posterior.js';
export type { PosteriorSolveOptions } from './solving/solve-with-posterior.js';
export type {
  CompanionRecord,
  DerivedKey,
  ElementKey,
  Evidence,
  InstrumentRecord,
  PeriodPeak,
  Quantity,
  Rival,
  SearchStage,
  SolutionRecord,
  Solved,
  WindowFunction,
} from './solving/types.js';
export type {
  BandRecord,
  DetectionRecord,
  DipSpectrum,
  LightCurveRecord,
  MidTimeRecord,
  PhotometryRecord,
  SolvedPhotometry,
  TransitDerivedKey,
  TransitElementKey,
  TransitEventRecord,
} from './solving/transit-types.js';

// The searches alone: periods of velocities, dips in light curves
export { searchPeriods } from './solving/search-periods.js';
export type { PeriodsOptions, PeriodsReport } from './solving/search-periods.js';
export { searchDips } from './solving/dips/search-dips.js';
export { searchTables } from './solving/dips/search-tables.js';
export type { TableDips } from './solving/dips/search-tables.js';
export type {
  DipCandidate,
  DipData,
  DipSearch,
  DipSearchOptions,
  RejectedDip,
} from './solving/dips/types.js';

// Mid-times alone: ephemeris, changes of the period, predictions; companions that pull at each other
export { solveTiming } from './solving/timing/solve-timing.js';
export type { TimingChoices } from './solving/timing/solve-timing.js';
export type { TimingModelRecord, TimingRecord, TimingSolved } from './solving/timing/types.js';
export { solveTimingSystem } from './solving/timing/solve-timing-system.js';
export type { CompanionTables, TimingSystemChoices } from './solving/timing/solve-timing-system.js';
export type { TimingSystemRecord, TimingSystemSolved } from './solving/timing/system-types.js';
export { fitInteraction } from './solving/timing/interaction-fit.js';
export type {
  InteractionFit,
  InteractionOptions,
  InteractionStar,
  InteractionTable,
} from './solving/timing/interaction-types.js';

// The velocity that a solution predicts at any time; the light that a disc leaves of a limb-darkened star
export { evaluateVelocity } from './signals/evaluate-velocity.js';
export type { VelocityModelPoint } from './signals/velocity-model.js';
export { transitFlux } from './signals/transit/transit-flux.js';

// Orbits: Kepler's equation, geometry, conversions, masses, surroundings, constants
export * from './orbit/index.js';

// Simulated observations
export { simulateObservations } from './planning/index.js';
export type { MockTable } from './planning/index.js';

// The dossier: its texts and tables, its charts, and writing it to disk
export {
  dossierFiles,
  elementsTable,
  formatProbability,
  formatQuantity,
  lightCurveTable,
  midTimesTable,
  modelTable,
  posteriorTable,
  report,
  residualsTable,
  solutionJson,
  stableJson,
  timingsTables,
  writeDossier,
  writeFiles,
} from './dossier/index.js';
export type { DossierFile, RunFacts, WriteChoices } from './dossier/index.js';
export { timingFiles } from './dossier/timing/timing-files.js';
export { systemFiles } from './dossier/timing/system-files.js';
export { renderCharts, renderDipsCharts, renderPeriodsCharts } from './dossier/charts/index.js';
export { renderTimingCharts } from './dossier/charts/render-timing.js';
export { renderSystemCharts } from './dossier/charts/render-timing-system.js';
export type { ChartFile } from './dossier/charts/index.js';

// What can go wrong
export { ConvergenceError, InputDataError, ModelDomainError, UsageError } from './errors.js';
export type { InputIssue } from './errors.js';
