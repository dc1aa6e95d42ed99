/** Invented light curves of the companions: what was measured, what was fitted, and what each event says of its time. */
import type {
  FittedLightCurve,
  TransitCurve,
  TransitEventRecord,
  WholeLightCurve,
} from '../../src/solving/transit-types.js';
import { quantity } from './solved-record-fixture.js';
import { durationDays, fromMid, HOURS, ownFlux, type Transiting } from './transiting-companions.js';

export interface TableRequest {
  readonly name: string;
  readonly band: string;
  readonly u1: number;
  readonly times: Float64Array;
  readonly noisePpm: number;
  readonly baseline: (time: number) => number;
  readonly trended: boolean;
}

export interface MadeTable {
  readonly fitted: FittedLightCurve;
  readonly whole: WholeLightCurve;
  readonly rmsPpm: number;
}

export function makeTable(
  request: TableRequest,
  companions: readonly Transiting[],
  random: { gauss(): number },
): MadeTable {
  const { times } = request;
  const transit = times.map((time) =>
    companions.reduce((all, one) => all + ownFlux(one, fromMid(one, time).days, request.u1) - 1, 1),
  );
  const baseline = times.map(request.baseline);
  const noise = times.map(() => 1e-6 * request.noisePpm * random.gauss());
  const flux = times.map((_, i) => baseline[i]! * (transit[i]! + noise[i]!));
  const kept: number[] = [];
  const segments: { start: number; end: number; events: { letter: string; cycle: number; midTimeBjdTdb: number }[] }[] = []; // prettier-ignore
  let open = '';
  times.forEach((time, row) => {
    const near = companions.flatMap((one) => {
      const { cycle, days } = fromMid(one, time);
      const within = Math.abs(days) < 1.5 * durationDays(one) || !request.trended;
      return within && Math.abs(days) < 0.25
        ? [
            {
              letter: one.letter,
              cycle,
              midTimeBjdTdb: one.midTimeBjdTdb + cycle * one.periodDays,
            },
          ]
        : [];
    });
    if (near.length === 0) {
      open = '';
      return;
    }
    const name = near.map(({ letter, cycle }) => `${letter}${cycle}`).join(' ');
    const last = segments.at(-1);
    if (
      last !== undefined &&
      open !== '' &&
      (open === name || last.events.some((e) => name.includes(`${e.letter}${e.cycle}`)))
    ) {
      // prettier-ignore
      last.end = kept.length + 1;
      for (const event of near)
        if (!last.events.some((e) => e.letter === event.letter && e.cycle === event.cycle))
          last.events.push(event);
    } else segments.push({ start: kept.length, end: kept.length + 1, events: near });
    open = name;
    kept.push(row);
  });
  const pick = (values: Float64Array): Float64Array => Float64Array.from(kept, (row) => values[row]!);
  const ownNoise = pick(noise);
  return {
    fitted: {
      name: request.name,
      band: request.band,
      timesBjdTdb: pick(times),
      flux: pick(flux),
      sigmas: Float64Array.from(kept, () => 1e-6 * request.noisePpm),
      baseline: pick(baseline),
      transit: pick(transit),
      segments,
    },
    whole: {
      name: request.name,
      timesBjdTdb: times,
      flux,
      trend: request.trended ? baseline : baseline.map(() => 1),
    },
    rmsPpm: 1e6 * Math.sqrt(ownNoise.reduce((sum, value) => sum + value * value, 0) / ownNoise.length),
  };
}

export function curveOf(one: Transiting, band: string, u1: number): TransitCurve {
  const half = 1.6 * durationDays(one);
  const hours = Float64Array.from({ length: 801 }, (_, i) => HOURS * half * (i / 400 - 1));
  return {
    letter: one.letter,
    band,
    hoursFromMidTransit: hours,
    flux: hours.map((value) => ownFlux(one, value / HOURS, u1)),
  };
}

export function eventsOf(tables: readonly MadeTable[], random: { gauss(): number }): TransitEventRecord[] {
  return tables
    .flatMap(({ fitted }) =>
      fitted.segments.flatMap(({ start, end, events }) =>
        events.map((event): TransitEventRecord => {
          const away = 0.4 * random.gauss();
          return {
            letter: event.letter,
            table: fitted.name,
            cycle: event.cycle,
            points: end - start,
            midTime: quantity(event.midTimeBjdTdb + away / 1440, 0.4 / 1440, 'd'),
            oMinusC: quantity(away, 0.4, 'min'),
          };
        }),
      ),
    )
    .sort((a, b) => a.letter.localeCompare(b.letter) || a.cycle - b.cycle);
}
