/** The numbers whose intervals and ranks are judged, read from a point of the posterior. */
import type { PortablePoint } from '../../src/solving/model-builder.js';
import type { CalibrationProblem } from './problems.js';

export interface Quantities {
  readonly names: readonly string[];
  /** Angles are given relative to those of `origin`, in (-pi, pi]. */
  read(point: PortablePoint, origin: PortablePoint): number[];
}

function longitude(companion: PortablePoint['companions'][number]): number {
  return companion.argPeriastronStarRad - (2 * Math.PI * companion.timePeriastronDays) / companion.periodDays;
}

function wrapped(angleRad: number): number {
  return angleRad - 2 * Math.PI * Math.round(angleRad / (2 * Math.PI));
}

export function quantitiesOf(problem: CalibrationProblem): Quantities {
  const several = problem.companions.length > 1;
  const names = problem.companions.flatMap(({ circular }, c) => {
    const own = circular
      ? ['ln P', 'K', 'mean longitude']
      : ['ln P', 'K', 'mean longitude', 'e', '√e cos ω', '√e sin ω'];
    return several ? own.map((name) => `${name} (${'bcd'[c]!})`) : own;
  });
  return {
    names: [...names, 'zero point', 'jitter'],
    read: (point, origin) => [
      ...point.companions.flatMap((companion, c) => {
        const root = Math.sqrt(companion.eccentricity);
        const omega = companion.argPeriastronStarRad;
        const always = [
          Math.log(companion.periodDays),
          companion.semiAmplitudeMps,
          wrapped(longitude(companion) - longitude(origin.companions[c]!)),
        ];
        return problem.companions[c]!.circular
          ? always
          : [...always, companion.eccentricity, root * Math.cos(omega), root * Math.sin(omega)];
      }),
      point.zeroPointsMps[0]!,
      point.jittersMps[0]!,
    ],
  };
}
