/** What the rest of the program may use of this room. */
export { readTable, readTables, parseTable, requestFor } from './table-reader.js';
export { combineTables } from './combine.js';
export { describeTable, type InstrumentSummary, type TableSummary } from './describe.js';
export {
  readCase,
  parseCase,
  caseFromTables,
  checkInstrumentChoices,
  type BareCaseOptions,
} from './case-reader.js';
export { parseMeasured, parseRange } from './quantity.js';
export { canonicalUnit, type QuantityKind } from './units.js';
export { readTimeLabel, type TimeLabel } from './time-label.js';
export { asBjdTdb, timeScaleError, toBjdTdb } from './time-scale.js';
export { didYouMean, nearest } from './suggest.js';
export type * from './types.js';
export { ELEMENT_NAMES, TIME_SCALES } from './types.js';
