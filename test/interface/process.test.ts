import { beforeAll, describe, expect, it } from 'vitest';

import { buildProgram, runProgram } from './built-program.js';

beforeAll(buildProgram);

const TABLE =
  'BJD_TDB,RV (m/s),e_RV (m/s)\n2459910.25,10.5,2\n2459950.75,-3.25,2.5\n2460001.5,3,3\n2460400.1,1,2\n';

describe('bin/tugline.js', () => {
  it('hands the exit code to the shell and keeps the two streams apart', async () => {
    expect(await runProgram(['--version'])).toMatchObject({ exitCode: 0, stderr: '' });
    const wrong = await runProgram(['slove']);
    expect(wrong).toMatchObject({ exitCode: 2, stdout: '' });
    expect(wrong.stderr).toContain('error: unknown command "slove"');
  });

  it('reads a table from standard input', async () => {
    const { exitCode, stdout } = await runProgram(['check', '-', '--json'], { input: TABLE });
    expect(exitCode).toBe(0);
    expect(JSON.parse(stdout)).toMatchObject({ tables: [{ rows: 4 }] });
  });

  it('writes no colours into a pipe, nor when NO_COLOR is set', async () => {
    const piped = await runProgram(['check', '-'], { input: TABLE });
    expect(piped.stdout).not.toContain('\u001b');
    const asked = await runProgram(['check', '-'], { input: TABLE, env: { NO_COLOR: '1' } });
    expect(asked.stdout).not.toContain('\u001b');
    // The negative control: the colours are there when they are wanted.
    const wanted = await runProgram(['check', '-'], { input: TABLE, env: { FORCE_COLOR: '1' } });
    expect(wanted.stdout).toContain('\u001b');
  });

  it('does not die when nobody reads its output', async () => {
    const { exitCode, stderr } = await runProgram(['check', '-'], { input: TABLE, deafReader: true });
    expect(stderr).toBe('');
    expect(exitCode).toBe(0);
  });

  it('refuses endless input instead of filling the memory', async () => {
    const { exitCode, stderr } = await runProgram(['check', '/dev/zero']);
    expect(exitCode).toBe(2);
    expect(stderr).toMatch(/^error: /);
  });
});
