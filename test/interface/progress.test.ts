import { describe, expect, it } from 'vitest';

import { progressOn, withProgress } from '../../src/cli/progress.js';
import { listeningTerminal } from './listening-terminal.js';

describe('progressOn', () => {
  it('is silent when quiet', () => {
    const { terminal, err } = listeningTerminal();
    const progress = progressOn(terminal, true);
    progress.update('search', 0.5);
    progress.done();
    expect(err).toEqual([]);
  });

  it('writes a line every few seconds where there is no screen, never a bar', () => {
    const { terminal, err } = listeningTerminal();
    let time = 0;
    const progress = progressOn(terminal, false, () => time);
    for (time = 0; time <= 12_000; time += 100) progress.update('search', time / 12_000);
    progress.done();
    expect(err).toEqual(['search: 42 %\n', 'search: 83 %\n']);
  });

  it('redraws one line on a screen and wipes it at the end', () => {
    const { terminal, err } = listeningTerminal();
    const progress = progressOn({ ...terminal, interactive: true }, false, () => 0);
    progress.update('search', 2);
    progress.update('search', 0.1);
    progress.done();
    progress.done();
    expect(err).toHaveLength(2);
    expect(err[0]).toContain('search');
    expect(err[1]).toBe('\r');
  });

  it('tells the time left while draws are taken, and only on a screen', () => {
    const { terminal, err } = listeningTerminal();
    let time = 0;
    const progress = progressOn({ ...terminal, interactive: true }, false, () => time);
    progress.update('searching', 0.3);
    // 10 % a second from 40 %: at 60 % four seconds are left; at 1 % in 10 s from 60 % on average 1.75 % a second.
    for (const [at, fraction] of [
      [1000, 0.4],
      [3000, 0.6],
      [13_000, 0.61],
    ] as const) {
      time = at;
      progress.update('sampling', fraction);
    }
    expect(err[0]).not.toContain('left');
    expect(err[1]!.endsWith('sampling: 40 %')).toBe(true);
    expect(err[2]!.endsWith('sampling: 60 %, about 4 s left')).toBe(true);
    expect(err[3]!.endsWith('sampling: 61 %, about 22 s left')).toBe(true);
    const plain = listeningTerminal();
    const lines = progressOn(plain.terminal, false, () => time);
    time += 6000;
    lines.update('sampling', 0.5);
    expect(plain.err).toEqual(['sampling: 50 %\n']);
  });

  it('is wiped when the work fails, and hands the error on', async () => {
    const { terminal, err } = listeningTerminal();
    const work = withProgress({ ...terminal, interactive: true }, false, (update) => {
      update('search', 0.5);
      return Promise.reject(new Error('no luck'));
    });
    await expect(work).rejects.toThrow('no luck');
    expect(err.at(-1)).toBe('\r');
  });
});
