/** What the rest of the program may use of this room. */
export { readTable, readTables, parseTable, requestFor } from './table-reader.js';
export { combineTables } from './combine.js';
export { describeTable, type InstrumentSummary, type TableSummary } from './describe.js';
export { readCase, parseCase, caseFromTables, type BareCaseOptions } from './case-reader.js';
export { checkChoices, checkInstrumentChoices } from './case-checks.js';
export { parseMeasured, parseRange } from './quantity.js';
export { canonicalUnit, type QuantityKind } from './units.js';
export { readTimeLabel, type TimeLabel } from './time-label.js';
export { asBjdTdb, timeScaleError, toBjdTdb } from './time-scale.js';
export { didYouMean, nearest } from './suggest.js';
export { readAnyTable, readAnyTables, parseAnyTable, type AnyTable } from './any-table.js';
export {
  describeLightCurve,
  describeMidTimes,
  type LightCurveSummary,
  type MidTimeSummary,
} from './describe-photometry.js';
export { gatherObservations } from './gather.js';
export type * from './mock-types.js';
export type * from './photometry-types.js';
export type * from './types.js';
export { COLUMN_MEANINGS, ELEMENT_NAMES, TABLE_CONTENTS, TIME_SCALES } from './types.js';
