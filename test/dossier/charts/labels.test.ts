import { describe, expect, it } from 'vitest';
import {
  cleanLabel,
  escapeXml,
  fileLetter,
  fixedText,
  percentText,
  significantText,
} from '../../../src/dossier/charts/labels.js';
import { parseXml } from '../../support/xml-check.js';

describe('cleanLabel', () => {
  it('takes out control characters, direction overrides and lone surrogates', () => {
    expect(cleanLabel('a\u0000b\u001bc\u202ed\u2066e\ud800f\ufeffg', 99)).toBe('a b c d e f g');
  });
  it('cuts long labels with an ellipsis, counting characters and not halves of them', () => {
    expect(cleanLabel('spectrograph', 6)).toBe('spect…');
    expect(cleanLabel('spectrograph', 12)).toBe('spectrograph');
    expect(cleanLabel('🔭🔭🔭🔭', 3)).toBe('🔭🔭…');
  });
});

describe('escapeXml', () => {
  it('gives text that an XML parser reads back as it was', () => {
    const nasty = `<b a="1">&amp;'</b>]]>`;
    expect(parseXml(`<t a="${escapeXml(nasty)}">${escapeXml(nasty)}</t>`)[0]).toMatchObject({
      attributes: { a: nasty },
      text: nasty,
    });
  });
  it('leaves no character that XML 1.0 forbids', () => {
    const all = Array.from({ length: 0x10000 }, (_, code) => String.fromCharCode(code)).join('');
    // Char ::= #x9 | #xA | #xD | [#x20-#xD7FF] | [#xE000-#xFFFD] | [#x10000-#x10FFFF] (XML 1.0, production 2).
    // Read one by one: in the run of all codes one high surrogate stands before a low one and makes a pair.
    const forbidden = /[^\t\n\r\u0020-\ud7ff\ue000-\ufffd\u{10000}-\u{10ffff}]/u;
    expect(Array.from(all, escapeXml).filter((one) => forbidden.test(one))).toEqual([]);
  });
});

describe('numbers as text', () => {
  it('writes a true minus sign and no negative zero', () => {
    expect(fixedText(-1.25, 1)).toBe('\u22121.3');
    expect(fixedText(-0.04, 1)).toBe('0.0');
  });
  it('keeps the wanted digits over the whole range', () => {
    expect(significantText(3.52474, 5)).toBe('3.5247');
    expect(significantText(0.0123456, 3)).toBe('0.0123');
    expect(significantText(123456, 3)).toBe('123456');
    expect(significantText(1.5e-7, 2)).toBe('1.5e\u22127');
    expect(significantText(NaN, 3)).toBe('?');
  });
  it('writes probabilities as percentages', () => {
    expect([0.1, 0.01, 0.001].map(percentText)).toEqual(['10 %', '1 %', '0.1 %']);
  });
});

it('fileLetter leaves nothing in a file name that could lead out of a folder', () => {
  expect(fileLetter('../b', 0)).toBe('b');
  expect(fileLetter('/\u0000', 2)).toBe('3');
});
