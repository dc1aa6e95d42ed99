import { EventEmitter } from 'node:events';
import { setImmediate as nextTurn } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';

import { withInterrupt } from '../../src/cli/interrupt.js';
import { listeningTerminal } from './listening-terminal.js';

describe('withInterrupt', () => {
  it('turns the first Ctrl-C into an abort, says so, and leaves the second to the process', async () => {
    const { terminal, err } = listeningTerminal();
    const source = new EventEmitter();
    const seen = await withInterrupt(
      terminal,
      async (signal) => {
        expect(source.listenerCount('SIGINT')).toBe(0); // until the loop turns Ctrl-C ends the program
        await nextTurn();
        expect(source.listenerCount('SIGINT')).toBe(1);
        expect(signal.aborted).toBe(false);
        source.emit('SIGINT');
        expect(source.listenerCount('SIGINT')).toBe(0);
        return signal.aborted;
      },
      source,
    );
    expect(seen).toBe(true);
    expect(err).toHaveLength(1);
    expect(err[0]).toContain('stopping early');
  });

  it('gives Ctrl-C back when the work ends, also when it ends at once or in an error', async () => {
    const { terminal } = listeningTerminal();
    const source = new EventEmitter();
    expect(await withInterrupt(terminal, () => Promise.resolve(7), source)).toBe(7);
    const failing = withInterrupt(
      terminal,
      () => nextTurn().then(() => Promise.reject(new Error('no luck'))),
      source,
    );
    await expect(failing).rejects.toThrow('no luck');
    await nextTurn();
    expect(source.listenerCount('SIGINT')).toBe(0);
  });

  it('wipes the progress bar before it speaks', async () => {
    const { terminal, err } = listeningTerminal();
    const source = new EventEmitter();
    await withInterrupt(
      { ...terminal, interactive: true },
      async () => {
        await nextTurn();
        source.emit('SIGINT');
      },
      source,
    );
    expect(err[0]).toBe('\r');
    expect(err[1]).toContain('stopping early');
  });
});
