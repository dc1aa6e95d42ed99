import { parse } from 'csv-parse/sync';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import {
  csvLines,
  csvText,
  escapeMarkdown,
  fileNameFrom,
  markdownCode,
  plainLabel,
} from '../../src/dossier/escape.js';

const SEED = 7;

describe('plainLabel', () => {
  it('removes what would move the cursor, change colours or reorder text', () => {
    expect(plainLabel('a\u001b[31mb\u0007\u202ec\u200bd')).toBe('a[31mbcd');
    expect(plainLabel('two\nlines\tand a tab')).toBe('two lines and a tab');
  });

  it('cuts long labels with an ellipsis', () => {
    expect(plainLabel('x'.repeat(50), 10)).toBe(`${'x'.repeat(9)}…`);
  });

  it('leaves no control character of any label', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (label) => {
        expect(/[\u0000-\u001f\u007f-\u009f\u202a-\u202e]/.test(plainLabel(label))).toBe(false);
      }),
      { seed: SEED, numRuns: 300 },
    );
  });
});

describe('escapeMarkdown', () => {
  it('shows tags, links, emphasis and table bars instead of obeying them', () => {
    expect(escapeMarkdown('<script>alert(1)</script>')).toBe('&lt;script&gt;alert(1)&lt;/script&gt;');
    expect(escapeMarkdown('![x](y)')).toBe('!\\[x\\](y)');
    expect(escapeMarkdown('a|b *c* _d_ `e`')).toBe('a\\|b \\*c\\* \\_d\\_ \\`e\\`');
    expect(escapeMarkdown('# heading')).toBe('\\# heading');
    expect(escapeMarkdown('http://example.org')).not.toContain('http:');
    expect(escapeMarkdown('a & b')).toBe('a &amp; b');
  });

  it('fences code longer than any backticks in it', () => {
    expect(markdownCode('a``b')).toBe('```a``b```');
    expect(markdownCode('`')).toBe('`` ` ``');
  });
});

describe('csvText', () => {
  it('disarms formulas of spreadsheets', () => {
    for (const sign of ['=', '+', '-', '@']) expect(csvText(`${sign}1`)).toBe(`'${sign}1`);
    expect(csvText(' =1')).toBe("' =1");
    expect(csvText('=1,2')).toBe('"\'=1,2"');
    expect(csvText('\t=1')).toBe("' =1");
  });

  it('is read back by a CSV parser as the label without its unprintable characters', () => {
    fc.assert(
      fc.property(fc.array(fc.string(), { minLength: 2, maxLength: 4 }), (labels) => {
        const [row]: string[][] = parse(csvLines([labels.map(csvText)]), { skip_empty_lines: false });
        expect(row).toEqual(
          labels.map((label) => {
            const plain = plainLabel(label, 2000);
            return /^\s*[=+\-@]/.test(plain) ? `'${plain}` : plain;
          }),
        );
      }),
      { seed: SEED, numRuns: 300 },
    );
  });
});

describe('fileNameFrom', () => {
  it.each([
    ['Vellamo', 'vellamo'],
    ['../../etc/passwd', 'etc-passwd'],
    ['..', 'target'],
    ['a\u0000b\nc', 'a-b-c'],
    ['.hidden', 'hidden'],
    ['Väinö 7 b', 'vaino-7-b'],
    ['', 'target'],
    ['a..b', 'a.b'],
  ])('%j becomes %j', (label, name) => {
    expect(fileNameFrom(label, 'target')).toBe(name);
  });

  it('is one harmless path component for any label', () => {
    fc.assert(
      fc.property(fc.string({ unit: 'binary' }), (label) => {
        expect(fileNameFrom(label, 'target')).toMatch(/^[a-z0-9]([a-z0-9.-]{0,58}[a-z0-9])?$/);
      }),
      { seed: SEED, numRuns: 500 },
    );
  });
});
