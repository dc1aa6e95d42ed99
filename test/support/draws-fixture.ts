/** Invented draws for a solution: correlated, curved and bounded as posteriors of orbits are; no sampler is involved. */
import type { PosteriorColumn, PosteriorDraws, Solved } from '../../src/solving/types.js';
import { randomSource } from './solved-fixture.js';

export interface DrawsRequest {
  readonly seed: number;
  readonly chains?: number;
  readonly drawsPerChain?: number;
  /** Correlation of one draw with the next in its chain, 0 .. 1. */
  readonly memory?: number;
  /** This chain (from 0) has not found where the others are. */
  readonly strayChain?: number;
}

type Gauss = () => number;

/** One slowly wandering standard normal series per chain: successive draws correlate as those of a sampler do. */
function wanderer(gauss: Gauss, memory: number): Gauss {
  let state = gauss();
  return () => (state = memory * state + Math.sqrt(1 - memory * memory) * gauss());
}

/**
 * Adds a posterior to an invented solution. Of each eccentric companion: P and T correlate at 0.95, e and ω bend around one
 * another (ω spreads the more the smaller e is), e is a folded normal where it is small; K and mass are proportional up to
 * the star's own spread. Jitters are folded at zero.
 */
export function withDraws(solved: Solved, request: DrawsRequest): Solved {
  const { chains = 4, drawsPerChain = 1000, memory = 0.3 } = request;
  const total = chains * drawsPerChain;
  const random = randomSource(request.seed);
  const columns: PosteriorColumn[] = [];
  const add = (key: string, unit: string, cycle: number, make: (index: number) => number): Float64Array => {
    const values = Float64Array.from({ length: total }, (_, index) => make(index));
    columns.push({ key, unit, cycle, values });
    return values;
  };
  const series = (): Float64Array => {
    const values = new Float64Array(total);
    for (let chain = 0; chain < chains; chain += 1) {
      const next = wanderer(() => random.gauss(), memory);
      const shift = chain === request.strayChain ? 2.5 : 0;
      for (let d = 0; d < drawsPerChain; d += 1) values[chain * drawsPerChain + d] = next() + shift;
    }
    return values;
  };
  for (const { letter, elements, derived, circular } of solved.record.companions) {
    const key = (name: string): string => `companions.${letter}.elements.${name}`;
    const centre = (name: keyof typeof elements): number => elements[name]?.value ?? 0;
    const [p, t, k, h, s, m] = [series(), series(), series(), series(), series(), series()];
    add(key('period'), 'd', 0, (i) => centre('period') * (1 + 1e-4 * p[i]!));
    const e0 = centre('eccentricity');
    const epoch = (i: number): number => 0.02 * (0.95 * p[i]! + Math.sqrt(1 - 0.95 ** 2) * t[i]!);
    if (!circular) {
      const width = e0 < 0.1 ? 0.04 : 0.02;
      const e = add(key('eccentricity'), '', 0, (i) => belowOne(Math.abs(e0 + width * h[i]!)));
      const omega = centre('argumentOfPeriastron');
      add(key('argumentOfPeriastron'), 'deg', 360, (i) => {
        const away =
          (((2 * s[i]! * 0.03) / Math.max(e[i]!, 0.01)) * 180) / Math.PI + (200 * (e[i]! - e0) ** 2) / width;
        return omega + away - 360 * Math.round(away / 360);
      });
      add(key('timeOfPeriastron'), 'd', 0, (i) => centre('timeOfPeriastron') + epoch(i));
    }
    add(key('timeOfInferiorConjunction'), 'd', 0, (i) => centre('timeOfInferiorConjunction') + epoch(i));
    add(key('semiAmplitude'), 'm/s', 0, (i) => Math.abs(centre('semiAmplitude') + 0.5 * k[i]!));
    const mass = derived.minimumMass.value;
    if (mass !== null) {
      const relative = 0.5 / Math.max(1, centre('semiAmplitude'));
      add(`companions.${letter}.derived.minimumMass`, 'M_jup', 0, (i) =>
        Math.abs(mass * (1 + relative * k[i]! + 0.02 * m[i]!)),
      );
    }
  }
  for (const { name, zeroPoint, jitter } of solved.record.velocity.instruments) {
    const [z, j] = [series(), series()];
    add(`velocity.instruments.${name}.zeroPoint`, 'm/s', 0, (i) => (zeroPoint.value ?? 0) + 0.4 * z[i]!);
    add(`velocity.instruments.${name}.jitter`, 'm/s', 0, (i) =>
      Math.abs((jitter.value ?? 0) * 0.2 + 0.6 * j[i]!),
    );
  }
  if (solved.record.velocity.slope.value !== 0) {
    const drift = series();
    add('velocity.slope', 'm/s/yr', 0, (i) => (solved.record.velocity.slope.value ?? 0) + 0.3 * drift[i]!);
  }
  const posterior: PosteriorDraws = { chains, drawsPerChain, columns, logDensity: new Float64Array(total) };
  return { ...solved, posterior, record: { ...solved.record, posterior: invented(posterior) } };
}

/** Folded at 1, where orbits cease to be bound. */
function belowOne(eccentricity: number): number {
  return eccentricity < 1 ? eccentricity : 1.999 - eccentricity;
}

function invented({ chains, drawsPerChain }: PosteriorDraws): Solved['record']['posterior'] {
  const draws = chains * drawsPerChain;
  return {
    method: 'invented draws',
    chains,
    draws,
    warmup: 100,
    rHatMax: 1.002,
    bulkEssMin: draws / 2,
    tailEssMin: draws / 3,
    ebfmiMin: 0.9,
    divergences: 0,
    status: 'converged',
    logEvidence: -120,
    logEvidenceError: 0.1,
    modes: [{ periods: [], logEvidence: -120, standardError: 0.1, weight: 1 }],
    priors: [],
  };
}
