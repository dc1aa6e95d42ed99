import { describe, expect, it } from 'vitest';
import { brief, notice, read, tableIssues } from './helpers.js';

describe('bad tables: every problem at once, each with its place', () => {
  it('names line, column and label of each bad cell', () => {
    const text =
      'BJD,RV,e_RV\n2459000,abc,1\n2459001,NaN,-1\n2459002,3,0\n2459003,3\n2459004,inf,2\n2020-01-01,1,1\n2459006,1,\n';
    expect(brief(tableIssues(text))).toEqual([
      '2:9 not-a-number RV',
      '3:9 missing-value RV',
      '3:13 non-positive-error e_RV',
      '4:11 non-positive-error e_RV',
      '5:- ragged-row -',
      '6:9 not-finite RV',
      '7:1 not-a-number BJD',
      '8:11 missing-value e_RV',
    ]);
  });

  it('quotes what was found and says what to try', () => {
    const [negative] = tableIssues('BJD,RV,err\n2459000,1,-0.8\n');
    expect(negative!.message).toContain('found "-0.8"; a measurement error must be > 0');
    expect(negative!.hint).toBe('is this a velocity column?');
    const [calendar] = tableIssues('date,RV,err\n2020-01-01T12:00,1,1\n2459000,1,1\n');
    expect(calendar!.hint).toContain('Julian dates');
  });

  it('finds the places of cells in blank-separated and quoted rows', () => {
    expect(brief(tableIssues('BJD   RV   err\n  2459000   x   1\n'))).toEqual(['2:13 not-a-number RV']);
    expect(brief(tableIssues('note,BJD,RV,err\n"a, b",2459000,x,1\n'))).toEqual(['2:16 not-a-number RV']);
  });

  it('says decimal commas once per column', () => {
    const text = 'BJD;RV;e_RV\n2459000,5;46,309;0,5\n2459001,5;46,309;0,5\n';
    expect(brief(tableIssues(text))).toEqual([
      '2:1 decimal-comma BJD',
      '2:11 decimal-comma RV',
      '2:18 decimal-comma e_RV',
    ]);
    expect(brief(tableIssues('2459000,5 46,309 0,5\n2459001,5 46,309 0,5\n'))).toHaveLength(3);
  });

  it.each([
    ['', 'empty-file'],
    ['\n \n\t\n', 'empty-file'],
    ['# only\n# comments\n', 'empty-file'],
    ['BJD,RV,err\n', 'no-rows'],
    ['BJD RV err\nd m/s m/s\n--- --- ---\n', 'no-rows'],
    ['BJD,RV,err\n1,2\0,3\n', 'binary-file'],
    ['BJD,RV,err\n2459000,"1,2\n2459001,3,4\n', 'broken-row'],
    ['a'.repeat(70_000), 'line-too-long'],
    ['\n'.repeat(250_001), 'too-many-lines'],
    [`${'1,'.repeat(600)}1\n`, 'too-many-columns'],
  ])('case %#: one clear problem', (text, code) => {
    expect(tableIssues(text).map((issue) => issue.code)).toEqual([code]);
  });

  it('names the line that opens a quotation mark', () => {
    expect(brief(tableIssues('BJD,RV,err\n2459000,1,2\n2459001,"1,2\n2459002,3,4\n'))).toEqual([
      '3:- broken-row -',
    ]);
  });

  it('calls prose no table instead of listing every line', () => {
    const prose =
      'It was a dark night.\nThe dome was shut for wind and rain.\nNobody\nobserved anything at all then\nand so on\nto the end.\n';
    expect(tableIssues(prose).filter((issue) => issue.code === 'not-a-table')).toHaveLength(1);
    expect(tableIssues(prose).filter((issue) => issue.code === 'ragged-row')).toHaveLength(0);
  });

  it('keeps 100 problems and counts the rest', () => {
    const issues = tableIssues(`BJD,RV,err\n${'2459000,x,1\n'.repeat(5000)}`);
    expect(issues).toHaveLength(101);
    expect(issues.at(-1)).toMatchObject({
      code: 'more-problems',
      message: '4900 further problems are not listed',
    });
  });

  it('refuses dates 200 years from the others', () => {
    const issues = tableIssues('BJD,RV,err\n2459000,1,1\n2459001,1,1\n24590029,1,1\n');
    expect(issues.map((issue) => `${issue.code} ${issue.line ?? ''}`)).toEqual(['impossible-span 4']);
  });

  it('refuses more instruments than a table can have', () => {
    const text = Array.from({ length: 300 }, (_, row) => `${2459000 + row},1,1,name${row}`).join('\n');
    expect(tableIssues(`BJD,RV,err,inst\n${text}\n`).map((issue) => issue.code)).toEqual([
      'too-many-instruments',
    ]);
  });
});

describe('hostile text', () => {
  it('keeps markup and paths as text', () => {
    const table = read(
      'BJD,RV,err,<script>alert(1)</script>,inst\n2459000,1,1,<b>,../../x\n2459001,1,1,&amp;,../../x\n',
    );
    expect([...table.kept.keys()]).toEqual(['<script>alert(1)</script>']);
    expect(table.instruments).toEqual(['../../x']);
  });

  it('strips control and direction characters from instrument names, aloud', () => {
    const table = read('BJD,RV,err,inst\n2459000,1,1,no\u001b[31mrth\n2459001,1,1,\u202esouth\n');
    expect(table.instruments).toEqual(['no[31mrth', 'south']);
    expect(notice(table, 'control-characters')?.lines).toEqual([2, 3]);
  });

  it('never prints control characters in a message', () => {
    const [issue] = tableIssues('BJD,RV,err\n2459000,\u001b[2Jx,1\n');
    expect(issue!.message).toContain('"\\u001b[2Jx"');
  });
});
