/** How a record was made: the same inputs, options and seed give the same record. */
export interface ProvenanceRecord {
  readonly program: 'tugline';
  readonly version: string;
  readonly node: string;
  readonly seed: number;
  readonly command: readonly string[];
  readonly inputs: readonly {
    readonly path: string;
    readonly sha256: string;
    readonly rows: number;
    readonly used: number;
  }[];
}
