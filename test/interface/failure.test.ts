import { describe, expect, it } from 'vitest';

import { describeFailure } from '../../src/cli/failure.js';
import {
  ConvergenceError,
  InputDataError,
  ModelDomainError,
  UsageError,
  type InputIssue,
} from '../../src/errors.js';

function issue(line: number, changes: Partial<InputIssue> = {}): InputIssue {
  return {
    code: 'not-a-number',
    file: 'north.csv',
    line,
    column: 3,
    field: 'RV',
    message: `found "x${line}"; a number is expected`,
    hint: 'look at the line',
    ...changes,
  };
}

describe('describeFailure', () => {
  it('gives one problem its place and its remedy', () => {
    expect(describeFailure(new InputDataError([issue(17)]))).toEqual({
      exitCode: 2,
      lines: [
        'error: found "x17"; a number is expected',
        '  where   north.csv:17:3 RV',
        '  try     look at the line',
      ],
    });
  });

  it('leaves out of a place what is not known', () => {
    const bare = issue(1, { line: null, column: null, field: null, hint: '' });
    expect(describeFailure(new InputDataError([bare])).lines).toEqual([
      'error: found "x1"; a number is expected',
      '  where   north.csv',
    ]);
  });

  it('lists twenty problems and counts the rest', () => {
    const issues = Array.from({ length: 23 }, (_, index) => issue(index + 1));
    const { lines } = describeFailure(new InputDataError(issues));
    expect(lines[0]).toBe('error: 23 problems in one input');
    expect(lines.filter((line) => line.startsWith('  north.csv:'))).toHaveLength(20);
    expect(lines).toContain('  north.csv:20:3 RV: found "x20"; a number is expected');
    expect(lines).toContain('  ... and 3 more');
    expect(lines.filter((line) => line.includes('look at the line'))).toHaveLength(1);
  });

  it('prints what is allowed and what to try of a wrong request, and no stack', () => {
    const error = new UsageError('the folder exists', { allowed: 'a new folder', hint: 'add --force' });
    expect(describeFailure(error)).toEqual({
      exitCode: 2,
      lines: ['error: the folder exists', '  allowed a new folder', '  try     add --force'],
    });
  });

  it('maps the other known errors to their exit codes', () => {
    expect(describeFailure(new ModelDomainError('eccentricity', 1.03, '[0, 1)'))).toEqual({
      exitCode: 2,
      lines: ['error: eccentricity 1.03 is outside [0, 1)', '  allowed [0, 1)'],
    });
    const stopped = describeFailure(
      new ConvergenceError('no solution after 50 steps', { steps: 50, chi2: 3.5 }),
    );
    expect(stopped.exitCode).toBe(1);
    expect(stopped.lines.slice(0, 2)).toEqual([
      'error: no solution after 50 steps',
      '  where   steps 50, chi2 3.5',
    ]);
  });

  it('keeps the stack of anything else and calls it a defect', () => {
    const { lines, exitCode } = describeFailure(new RangeError('boom'));
    expect(exitCode).toBe(1);
    expect(lines[0]).toContain('defect');
    expect(lines.join('\n')).toContain('RangeError: boom');
    expect(lines.some((line) => line.includes(' at '))).toBe(true);
    expect(describeFailure('thrown text').lines.join('\n')).toContain('thrown text');
  });

  it('prints no control character of a message', () => {
    const error = new InputDataError([issue(1, { message: 'a\u001b[2Jb', file: 'x\u0007.csv' })]);
    expect(describeFailure(error).lines.join('\n')).not.toMatch(/[\u0000-\u0009\u000b-\u001f]/);
  });
});
