/** Colours and lines of the charts of a posterior, and the name at the start of their headings. */
import type { Solved } from '../../solving/types.js';
import { cleanLabel } from './labels.js';
import { shade, tint } from './style.js';

const BASE = '#0072b2';

export const POSTERIOR_LOOK: Readonly<
  Record<'pale' | 'medium' | 'strong' | 'line' | 'point' | 'median' | 'reported', string>
> = {
  /** Everything, and the central parts of it. */
  pale: tint(BASE, 0.86),
  medium: tint(BASE, 0.66),
  strong: tint(BASE, 0.42),
  line: shade(BASE, 0.3),
  point: tint(BASE, 0.35),
  median: '#111111',
  reported: '#d55e00',
};

/** Fewer draws than this make no density. */
export const FEWEST_DRAWS = 50;

/** Number of draws; 0 without a posterior. */
export function drawCount({ posterior }: Solved): number {
  return posterior === null ? 0 : posterior.chains * posterior.drawsPerChain;
}

/** Start of a heading: `Vellamo b: `, `Vellamo: ` without a companion, without the target where its name is too long. */
export function headingName({ record }: Solved, companion?: number): string {
  const target = cleanLabel(record.target, 40);
  const letter = companion === undefined ? '' : cleanLabel(record.companions[companion]?.letter ?? '', 8);
  if (target !== '' && !target.endsWith('…')) return `${[target, letter].join(' ').trimEnd()}: `;
  return letter === '' ? '' : `companion ${letter}: `;
}
