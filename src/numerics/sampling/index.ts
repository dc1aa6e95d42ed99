// Sampling
export type { SmoothDensity } from './density.js';
export { NutsChain } from './nuts.js';
export type { ChainDraws, ChainSettings } from './nuts.js';
export { checkGradient } from './gradient-check.js';
export type { GradientCheck } from './gradient-check.js';

// Diagnostics
export { basicEss, bulkEss, ebfmi, rankNormalisedRHat, tailEss } from './diagnostics.js';

// Marginal likelihoods
export { bridgeEvidence } from './bridge.js';
export type { BridgeEvidence, BridgeOptions } from './bridge.js';
export { importanceEvidence } from './importance.js';
export type { ImportanceEvidence, ImportanceOptions } from './importance.js';
