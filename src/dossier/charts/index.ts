export {
  describeCharts,
  renderCharts,
  renderDipsCharts,
  renderDrawings,
  renderPeriodsCharts,
} from './render-charts.js';
export type { ChartDrawing, ChartFile } from './chart-drawing.js';
export { velocitiesChart } from './velocities-chart.js';
export { foldedChart, foldedCharts } from './folded-chart.js';
export { periodogramChart, periodogramCharts } from './periodogram-chart.js';
export { orbitChart, orbitCharts } from './orbit-chart.js';
export { pairsChart, pairsCharts } from './pairs-chart.js';
export { marginalsCharts } from './marginals-chart.js';
export { chainsCharts } from './chains-chart.js';
export { lightCurveCharts } from './light-curve-chart.js';
export { transitChart, transitCharts } from './transit-chart.js';
export { transitsChart, transitsCharts } from './transits-chart.js';
export { oddEvenCharts } from './odd-even-chart.js';
export { midTimesCharts } from './mid-times-chart.js';
export { dipsCharts } from './dips-chart.js';
