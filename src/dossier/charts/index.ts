export { describeCharts, renderCharts, renderDrawings, renderPeriodsCharts } from './render-charts.js';
export type { ChartDrawing, ChartFile } from './chart-drawing.js';
export { velocitiesChart } from './velocities-chart.js';
export { foldedChart, foldedCharts } from './folded-chart.js';
export { periodogramChart, periodogramCharts } from './periodogram-chart.js';
export { orbitChart, orbitCharts } from './orbit-chart.js';
export { pairsChart, pairsCharts } from './pairs-chart.js';
export { marginalsCharts } from './marginals-chart.js';
export { chainsCharts } from './chains-chart.js';
