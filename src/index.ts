/**
 * tugline as a library: the way from tables to a dossier, for scripts of your own. Nothing here prints, asks or exits; what goes
 * wrong is thrown as one of the errors at the end.
 *
 * ```js
 * import { caseFromTables, combineTables, formatQuantity, readTables, solveCase } from 'tugline';
 *
 * const theCase = caseFromTables(['data-samples/north.csv', 'data-samples/south.csv'], {
 *   target: 'Vellamo',
 *   starMass: '0.94 +- 0.03 M_sun',
 * });
 * const velocities = combineTables(await readTables(theCase.tables));
 * const { record } = solveCase(theCase, velocities, {
 *   seed: 1,
 *   quick: true,
 *   permutations: 0,
 *   provenance: { version: '0.1.0', node: process.version, command: ['vellamo.mjs'] },
 * });
 * for (const { letter, elements, derived } of record.companions)
 *   console.log(letter, formatQuantity(elements.period, 'text'), formatQuantity(derived.minimumMass, 'text'));
 * ```
 *
 * Times are BJD in TDB, velocities m/s and positive when the star recedes; the argument of periastron is that of the star's orbit.
 */

// Tables and cases: from files to the velocities of one target
export {
  asBjdTdb,
  caseFromTables,
  checkInstrumentChoices,
  combineTables,
  describeTable,
  parseCase,
  parseTable,
  readCase,
  readTable,
  readTables,
  requestFor,
} from './observations/index.js';
export type {
  BareCaseOptions,
  BjdTdb,
  Case,
  CompanionChoice,
  ElementChoice,
  InstrumentChoice,
  Measured,
  MockPlan,
  TableNotice,
  TableRequest,
  TableSummary,
  TimeScale,
  VelocitySet,
  VelocityTable,
} from './observations/index.js';

// The main job: companions, orbits and masses; and the periods alone
export { solveCase } from './solving/solve-case.js';
export type { SolveOptions } from './solving/solve-case.js';
export { solveWithPosterior } from './solving/solve-with-posterior.js';
export type { PosteriorSolveOptions } from './solving/solve-with-posterior.js';
export { searchPeriods } from './solving/search-periods.js';
export type { PeriodsOptions, PeriodsReport } from './solving/search-periods.js';
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

// The velocity that a solution predicts at any time
export { evaluateVelocity } from './signals/evaluate-velocity.js';
export type { VelocityModelPoint } from './signals/velocity-model.js';

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
  modelTable,
  report,
  residualsTable,
  solutionJson,
  writeDossier,
} from './dossier/index.js';
export type { DossierFile, RunFacts, WriteChoices } from './dossier/index.js';
export { renderCharts, renderPeriodsCharts } from './dossier/charts/index.js';
export type { ChartFile } from './dossier/charts/index.js';

// What can go wrong
export { ConvergenceError, InputDataError, ModelDomainError, UsageError } from './errors.js';
export type { InputIssue } from './errors.js';
