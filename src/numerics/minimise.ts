/** General-purpose minimisation, by what is known of the function. */
export { minimiseScalar } from './minimise-scalar.js';
export type { ScalarMinimum } from './minimise-scalar.js';
export { minimiseSmooth } from './minimise-smooth.js';
export type { SmoothMinimum, SmoothOptions, ValueAndGradient } from './minimise-smooth.js';
export { nelderMead } from './nelder-mead.js';
export type { NelderMeadOptions, NelderMeadResult } from './nelder-mead.js';
