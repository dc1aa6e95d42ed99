/** Our side of periodogram.bench.ts, in a process of its own: INPUT.json REPEATS [POWERS.f64]. */
import { readFileSync, writeFileSync } from 'node:fs';
import { makeBackground } from '../../src/solving/linear-background.js';
import { periodogramPower } from '../../src/solving/periodogram.js';
import { callTimesMs, requireFinite } from './measure.js';
import type { PeriodogramInput } from './periodogram.bench.js';

const [input, repeats, powers] = process.argv.slice(2);
const given = JSON.parse(readFileSync(input!, 'utf8')) as PeriodogramInput;
const timesDays = Float64Array.from(given.timesDays);
const velocitiesMps = Float64Array.from(given.velocitiesMps);
const sigmasMps = Float64Array.from(given.sigmasMps);

let power = new Float64Array(0);
const timesMs = callTimesMs(Number(repeats), () => {
  const weights = sigmasMps.map((sigma) => 1 / (sigma * sigma));
  const mean = new Float64Array(timesDays.length).fill(1);
  power = Float64Array.from(
    periodogramPower(makeBackground(timesDays, velocitiesMps, weights, [mean]), given),
  );
});
requireFinite('power', power);
if (powers !== undefined) writeFileSync(powers, new Uint8Array(power.buffer));
process.stdout.write(JSON.stringify({ timesMs }));
