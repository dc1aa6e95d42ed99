/** Our side of transit-flux.bench.ts, in a process of its own: POINTS RADIUS_RATIO REPEATS [VALUES.f64]. */
import { writeFileSync } from 'node:fs';
import { transitFlux } from '../../src/signals/transit/transit-flux.js';
import { callTimesMs, requireFinite } from './measure.js';

const [points, ratio, repeats, path] = process.argv.slice(2);
const count = Number(points);
const radiusRatio = Number(ratio);
const separations = Float64Array.from({ length: count }, (_, i) => ((1.1 + radiusRatio) * (i + 0.5)) / count);
const values = new Float64Array(5 * count);
const one = new Float64Array(5);
const timesMs = callTimesMs(Number(repeats), () => {
  for (let i = 0; i < count; i++) {
    transitFlux(separations[i]!, radiusRatio, 0.4, 0.3, one);
    values[5 * i] = one[0]!;
    values[5 * i + 1] = one[1]!;
    values[5 * i + 2] = one[2]!;
    values[5 * i + 3] = one[3]!;
    values[5 * i + 4] = one[4]!;
  }
});
requireFinite('flux', values);
if (path !== undefined) writeFileSync(path, new Uint8Array(values.buffer));
process.stdout.write(JSON.stringify({ timesMs }));
