/** The main job: `solve --quick` of 100 velocities of one companion as a whole process, and where the time goes. */
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { median, outputOf, processTimesMs, ROOT } from './measure.js';
import { simulatedVelocities, tableText } from './simulated.js';

const VELOCITIES = 100;
const SPAN_DAYS = 1200;
const ROUNDS = 5;
const STATIONS = join(ROOT, 'test/bench/solve-process.mjs');

export function benchSolve(): string[] {
  const folder = mkdtempSync(join(tmpdir(), 'tugline-bench-'));
  try {
    const table = join(folder, 'bench.csv');
    writeFileSync(table, tableText(simulatedVelocities(VELOCITIES, SPAN_DAYS)));
    const words = ['solve', table, '--quick', '--out', join(folder, 'dossier'), '--force', '--quiet'];
    const [whole, start] = processTimesMs(
      [
        [join(ROOT, 'bin/tugline.js'), ...words],
        ['-e', '0'],
      ],
      ROUNDS,
    );
    const runs = Array.from(
      { length: ROUNDS },
      () => JSON.parse(outputOf(process.execPath, [STATIONS, table, folder])) as Record<string, number>,
    );
    const stations = Object.keys(runs[0]!).map(
      (station) => `${station} ${median(runs.map((run) => run[station]!)).toFixed(0)}`,
    );
    return [
      `solve --quick, ${VELOCITIES} velocities over ${SPAN_DAYS} d, one companion: ${(whole! / 1000).toFixed(2)} s as a process ` +
        `(node alone ${start!.toFixed(0)} ms); stations in ms: ${stations.join(', ')}`,
    ];
  } finally {
    rmSync(folder, { recursive: true, force: true });
  }
}
