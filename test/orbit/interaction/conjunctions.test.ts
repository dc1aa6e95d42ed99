import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { ConvergenceError, ModelDomainError } from '../../../src/errors.js';
import { conjunctionTimes } from '../../../src/orbit/interaction/conjunctions.js';
import type {
  InteractingCompanion,
  InteractingSystem,
} from '../../../src/orbit/interaction/initial-state.js';
import { SwiftTransits } from '../../../src/orbit/interaction/swift-transits.js';
import { expectWithin } from '../../support/expect-within.js';

interface Motion extends Omit<InteractingSystem, 'epochDays'> {
  readonly name: string;
  readonly spanDays: number;
  readonly expected: readonly { transits: readonly number[]; occultations: readonly number[] }[];
}
interface CircularPair {
  readonly P: readonly [number, number];
  readonly m: readonly [number, number];
  readonly lambda: readonly [number, number];
  readonly span: number;
  readonly first: readonly (readonly number[])[];
  readonly last: readonly number[];
  readonly count: readonly number[];
}
function load(name: string): unknown {
  return JSON.parse(readFileSync(new URL(`../../reference/interaction/${name}`, import.meta.url), 'utf8'));
}
const { motions } = load('interaction.json') as { motions: readonly Motion[] };
const { cases } = load('circular-pairs.json') as { cases: readonly CircularPair[] };

function companion(
  massRatio: number,
  periodDays: number,
  conjunctionDays: number,
  eCosOmega = 0,
  eSinOmega = 0,
): InteractingCompanion {
  return {
    massRatio,
    periodDays,
    conjunctionDays,
    eCosOmega,
    eSinOmega,
    inclinationRad: Math.PI / 2,
    nodeRad: 0,
  };
}

function circularPair({ P, m, lambda }: CircularPair): InteractingCompanion[] {
  return P.map((period, i) =>
    companion(m[i]!, period, (period * (Math.PI / 2 - lambda[i]!)) / (2 * Math.PI)),
  );
}

describe('conjunctionTimes', () => {
  it('matches scipy integrations of pairs from circular orbits (reference/interaction/circular-pairs.json)', () => {
    for (const pair of cases) {
      const found = conjunctionTimes(
        { starMassSolar: 1, epochDays: 0, companions: circularPair(pair) },
        0,
        pair.span,
      );
      found.forEach(({ transits }, i) => {
        expect(transits.length).toBe(pair.count[i]);
        pair.first[i]!.forEach((time, k) => {
          expectWithin(transits[k]!, time, {
            abs: 1e-9,
            unit: 'd',
            why: 'measured 5e-12; asked for is 1e-7',
          });
        });
        expectWithin(transits[transits.length - 1]!, pair.last[i]!, {
          abs: 1e-7,
          unit: 'd',
          why: 'measured 2e-9 after 2500 d, 2e-8 after 8100 d, growing like the squared time: drift of the reference energy',
        });
      });
    }
  });

  it.each(motions)('matches scipy in an inertial frame: $name', (motion) => {
    const found = conjunctionTimes({ ...motion, epochDays: 0 }, 0, motion.spanDays);
    motion.expected.forEach(({ transits, occultations }, i) => {
      for (const [got, want] of [
        [found[i]!.transits, transits],
        [found[i]!.occultations, occultations],
      ] as const) {
        expect(got.length).toBe(want.length);
        want.forEach((time, k) => {
          expectWithin(got[k]!, time, {
            abs: 1e-8,
            unit: 'd',
            why: 'interpolation of both; asked for is 1e-7',
          });
        });
      }
    });
  });

  it('follows Kepler exactly when the companions have no mass', () => {
    const companions = [companion(0, 10, 3, 0.3, 0.4), companion(0, 21, 5, -0.1, 0.2)];
    const [b, c] = conjunctionTimes({ starMassSolar: 1, epochDays: 0, companions }, -500, 1000);
    b!.transits.forEach((time, k) => {
      expectWithin(time, 3 + 10 * (k - 50), {
        abs: 3e-9,
        unit: 'd',
        why: 'measured 1e-9 over 100 revolutions of e = 0.5',
      });
    });
    c!.transits.forEach((time, k) => {
      expectWithin(time, 5 + 21 * (k - 24), { abs: 3e-9, unit: 'd', why: 'the same' });
    });
    expect(b!.transits.length).toBe(150);
  });

  it('gives the same times from an epoch before, within and after, once the elements describe the same motion', () => {
    // A pair without mass has the same elements at every epoch.
    const companions = [companion(0, 7, 1, 0.1, 0), companion(0, 16, 2)];
    const times = [-40, 30, 120].map((epochDays) =>
      conjunctionTimes({ starMassSolar: 1, epochDays, companions }, 0, 100),
    );
    for (const other of times.slice(1)) {
      other.forEach(({ transits }, i) => {
        expect(transits.length).toBe(times[0]![i]!.transits.length);
        transits.forEach((time, k) => {
          expectWithin(time, times[0]![i]!.transits[k]!, { abs: 1e-9, unit: 'd', why: 'integration' });
        });
      });
    }
  });

  it('refuses what cannot be', () => {
    const good = [companion(1e-5, 10, 0), companion(1e-5, 20.4, 0)];
    const at = (changed: Partial<InteractingCompanion>): InteractingSystem => ({
      starMassSolar: 1,
      epochDays: 0,
      companions: [{ ...good[0]!, ...changed }, good[1]!],
    });
    expect(() => conjunctionTimes(at({ eCosOmega: 1 }), 0, 10)).toThrow(ModelDomainError);
    expect(() => conjunctionTimes(at({ periodDays: -1 }), 0, 10)).toThrow(ModelDomainError);
    expect(() => conjunctionTimes(at({ massRatio: -1e-5 }), 0, 10)).toThrow(ModelDomainError);
    expect(() => conjunctionTimes(at({}), 10, 0)).toThrow(ModelDomainError);
    // Two bodies at one place.
    const same = { starMassSolar: 1, epochDays: 0, companions: [good[0]!, good[0]!] };
    expect(() => conjunctionTimes(same, 0, 10)).toThrow(ConvergenceError);
  });
});

describe('SwiftTransits', () => {
  it.each([0, 0.1, 0.3])('agrees with the exact integration, e = %f', (e) => {
    const companions = [
      companion(1e-4, 10, 2, e * Math.cos(0.5), e * Math.sin(0.5)),
      companion(5e-5, 20.4, 4, e * Math.cos(0.9), e * Math.sin(0.9)),
    ];
    const exact = conjunctionTimes({ starMassSolar: 1, epochDays: 0, companions }, 0, 600);
    const swift = new SwiftTransits(2, 100);
    expect(swift.follow(companions, 600)).toBe(true);
    exact.forEach(({ transits }, i) => {
      transits.forEach((time, k) => {
        expectWithin(swift.times[i]![k]!, time, {
          abs: 1e-6,
          unit: 'd',
          why: 'measured 3e-7; that is 0.03 s',
        });
      });
    });
  });

  it('says when there is no room or no motion', () => {
    const companions = [companion(1e-4, 10, 2), companion(5e-5, 20.4, 4)];
    expect(new SwiftTransits(2, 5).follow(companions, 600)).toBe(false);
    expect(new SwiftTransits(2, 100).follow([companions[0]!, companions[0]!], 600)).toBe(false);
  });
});
