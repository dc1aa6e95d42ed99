/** The form of every number that is reported. */

/** A number with its uncertainty. `lower` and `upper` bound the central 68.3 %; an unknown is `null` with a `why`. */
export interface Quantity {
  readonly value: number | null;
  readonly sigma: number | null;
  readonly lower: number | null;
  readonly upper: number | null;
  readonly unit: string;
  readonly fixed?: true;
  readonly why?: string;
}
