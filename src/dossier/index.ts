// The dossier: what people receive.
export { dossierFiles } from './dossier-files.js';
export { solutionJson, stableJson } from './json.js';
export { report } from './report.js';
export { elementsTable } from './elements-table.js';
export { residualsTable } from './residuals-table.js';
export { lightCurveTable } from './light-curve-table.js';
export { midTimesTable } from './mid-times-table.js';
export { timingsTables } from './timings-table.js';
export { modelGrid, modelTable, type ModelGrid } from './model-table.js';
export { posteriorTable } from './posterior-table.js';
export { runJson, type RunFacts } from './run-record.js';

// Writing.
export { checkDestination, writeDossier, type DossierFile, type WriteChoices } from './write-dossier.js';
export { checkFiles, writeFiles } from './write-files.js';

// Numbers and labels as they are shown.
export { formatProbability, formatQuantity, isUpperLimit, roundedParts, significant } from './numbers.js';
export { csvLines, csvText, escapeMarkdown, fileNameFrom, markdownCode, plainLabel } from './escape.js';
