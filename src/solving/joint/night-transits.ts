/** Transits in single nights of which no ephemeris is known. */
import type { LightCurveTable } from '../../observations/photometry-types.js';
import { dipOfNight } from './event-dips.js';
import type { FoundTransit, TransitSearch } from './found-transit.js';

/** A dip in a single night is believed above this gain in chi-square. */
const NIGHT_GAIN = 40;
/** Fractions of the time between two nights that are named as possible periods. */
const NAMED_FRACTIONS = 4;

/**
 * The clearest of the dips; the others are named with what they would say of the period, since one of many fractions of the
 * time between them is right and nothing tells which.
 *
 * @param periodDays - stated by the case, or `null`
 */
export function nightTransits(
  lightCurves: readonly LightCurveTable[],
  epochBjdTdb: number,
  letter: string,
  periodDays: number | null,
): Pick<TransitSearch, 'notices'> & { readonly transits: readonly FoundTransit[] } {
  const seen = lightCurves.flatMap((table) => {
    const dip = dipOfNight(table, epochBjdTdb);
    return dip !== null && dip.gain > NIGHT_GAIN ? [{ table, dip }] : [];
  });
  const [first, ...others] = seen.sort((a, b) => b.dip.gain - a.dip.gain);
  if (first === undefined) return { transits: [], notices: [] };
  const { dip } = first;
  const span = first.table.timesBjdTdb.at(-1)! - first.table.timesBjdTdb[0]!;
  const notices =
    periodDays !== null
      ? []
      : others.map(({ table, dip: other }) => {
          const apart = Math.abs(other.midTimeDays - dip.midTimeDays);
          const periods = Array.from({ length: NAMED_FRACTIONS }, (_, n) => (apart / (n + 1)).toFixed(3));
          return {
            code: 'second-lone-transit',
            message: `light curve ${table.name}: another dip, in the middle at ${(epochBjdTdb + other.midTimeDays).toFixed(3)}, ${apart.toFixed(3)} d from that of ${first.table.name}. If both are of one companion its period is ${periods.join(', ')} d or a smaller fraction; which one the data do not tell, so that only ${first.table.name} is fitted. State period: of the companion in the case to fit both`,
          };
        });
  return {
    notices,
    transits: [
      {
        ephemeris: {
          letter,
          periodDays,
          midTimeDays: dip.midTimeDays,
          durationDays: dip.durationDays,
          depth: dip.depth,
          occultationLagDays: null,
        },
        how: 'one event',
        periodSigmaDays: null,
        midTimeSigmaDays: 0.05 * dip.durationDays,
        shortestPeriodDays: Math.max(0.5 * span, 2 * dip.durationDays),
        candidate: null,
        isSeen: true,
      },
    ],
  };
}
