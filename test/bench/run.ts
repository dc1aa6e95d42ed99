/** `npm run bench -- [part of a name]`: prints ratios measured in this run. Times on a shared machine mean little alone. */
import { cpus } from 'node:os';
import { benchBoxSearch } from './box-search.bench.js';
import { benchGaussianProcess } from './gaussian-process.bench.js';
import { benchKepler } from './kepler.bench.js';
import { benchLeastSquares } from './least-squares.bench.js';
import { benchPeriodogram } from './periodogram.bench.js';
import { benchSampler } from './sampler.bench.js';
import { benchSolve } from './solve.bench.js';
import { benchStart } from './start.bench.js';
import { benchTransitFlux } from './transit-flux.bench.js';

const BENCHES: readonly (readonly [name: string, bench: () => string[]])[] = [
  ['kepler', benchKepler],
  ['periodogram', benchPeriodogram],
  ['box-search', benchBoxSearch],
  ['sampler', benchSampler],
  ['solve', benchSolve],
  ['start', benchStart],
  ['least-squares', benchLeastSquares],
  ['transit-flux', benchTransitFlux],
  ['gaussian-process', benchGaussianProcess],
];

const wanted = process.argv[2] ?? '';
const processors = cpus();
process.stdout.write(
  `${processors[0]?.model ?? 'unknown processor'}, ${processors.length} cores, Node ${process.version}, ${new Date().toISOString().slice(0, 10)}\n`,
);
for (const [name, bench] of BENCHES) {
  if (!name.includes(wanted)) continue;
  for (const line of bench()) process.stdout.write(`${line}\n`);
}
