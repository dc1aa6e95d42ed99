/** Planning: what stands in a site's sky, which nights can be used, and simulated observations. */
export { simulateObservations } from './mock.js';
export type { MockTable } from './mock.js';
export { observableWindows } from './observing-nights.js';
export type { ObservableNight, ObservableWindow, SkyPlan } from './observing-nights.js';
export { barycentricMinusUtcDays } from './site-clock.js';
export {
  airmass,
  altitudeDeg,
  altitudeOfAirmass,
  greenwichSiderealDeg,
  precessFromJ2000,
  separationDeg,
  sunPosition,
} from './sky.js';
export type { SkyDirection, SunPosition } from './sky.js';
