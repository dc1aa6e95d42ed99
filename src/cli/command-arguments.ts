/** The operands and options of one call, checked as they are asked for. */
import { UsageError } from '../errors.js';
import { plainLabel } from '../dossier/escape.js';
import { parseMeasured } from '../observations/quantity.js';
import type { Measured } from '../observations/types.js';
import { canonicalUnit, type QuantityKind } from '../observations/units.js';

export class CommandArguments {
  /** Files and folders named on the command line, in order. */
  readonly operands: readonly string[];
  /** The command for the record of a solution (`recordedCommand`). */
  readonly command: readonly string[];
  private readonly values: ReadonlyMap<string, string | true>;

  constructor(
    operands: readonly string[],
    values: ReadonlyMap<string, string | true>,
    command: readonly string[],
  ) {
    this.operands = operands;
    this.values = values;
    this.command = command;
  }

  isOn(name: string): boolean {
    return this.values.has(name);
  }

  /** The text of an option, `null` when it was not given. */
  text(name: string): string | null {
    const value = this.values.get(name);
    return typeof value === 'string' ? value : null;
  }

  /** The folder of `--out`, `null` when it was not given. @throws UsageError for an empty name */
  folder(): string | null {
    const text = this.text('out');
    if (text?.trim() === '') throw refused('out', text, 'the name of a folder');
    return text;
  }

  /** @throws UsageError unless the option is one of `allowed` (compared without regard to case) */
  choice<T extends string>(name: string, allowed: readonly T[]): T | null {
    const text = this.text(name);
    if (text === null) return null;
    const found = allowed.find((candidate) => candidate.toLowerCase() === text.trim().toLowerCase());
    if (found === undefined) throw refused(name, text, allowed.join(', '));
    return found;
  }

  /** @throws UsageError unless the option is a whole number between `least` and `most` */
  wholeNumber(name: string, least: number, most: number): number | null {
    const text = this.text(name);
    if (text === null) return null;
    const value = Number(text);
    if (!/^\s*[-+]?\d/.test(text) || !Number.isInteger(value) || value < least || value > most)
      throw refused(name, text, `a whole number from ${least} to ${most}`);
    return value;
  }

  /** A quantity above zero with an optional uncertainty and unit, in the unit used inside. */
  quantity(name: string, kind: QuantityKind): Measured | null {
    const text = this.text(name);
    if (text === null) return null;
    let measured: Measured;
    try {
      measured = parseMeasured(text, kind);
    } catch (error) {
      if (!(error instanceof UsageError)) throw error;
      throw new UsageError(
        `--${name}: ${error.message}`,
        { allowed: error.allowed, hint: error.hint },
        { cause: error },
      );
    }
    if (measured.value <= 0) throw refused(name, text, `a ${kind} above 0, in ${canonicalUnit(kind)}`);
    return measured;
  }
}

function refused(name: string, found: string, allowed: string): UsageError {
  return new UsageError(`--${name} is "${plainLabel(found, 60)}"`, {
    allowed,
    hint: 'tugline COMMAND --help lists the options with their units',
  });
}
