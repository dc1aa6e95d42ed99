/** Every option of the program, once, with the words that the help prints. */

export const OPTION_GROUPS = ['Input', 'Model', 'Search', 'Uncertainty', 'Output', 'Help'] as const;

export interface OptionSpec {
  readonly name: string;
  readonly group: (typeof OPTION_GROUPS)[number];
  /** What stands for the value in the help; `null` for a switch. */
  readonly value: string | null;
  /** With its unit and its default. */
  readonly help: string;
}

function option(name: string, group: OptionSpec['group'], value: string | null, help: string): OptionSpec {
  return { name, group, value, help };
}

/** How a table is to be read, where the table itself does not say. */
export const INPUT_OPTIONS: readonly OptionSpec[] = [
  option('columns', 'Input', 'LIST', 'which column is what, by label or number: "time=BJD,velocity=2,velocity-error=3,instrument=site,quality=flag"; further flux, magnitude, error, exposure, band, cycle, source, kind (default: recognised)'),
  option('holds', 'Input', 'WHAT', 'velocities, light-curve or mid-times (default: recognised)'),
  option('instrument', 'Input', 'NAME', "the table's instrument (default: its instrument column, else the file name)"),
  option('time-scale', 'Input', 'SCALE', 'BJD_TDB, BJD_UTC, BJD, HJD_UTC, HJD_TT, HJD, JD_UTC, JD_TT or JD, with the days that are left out: "BJD_TDB - 2457000" (default: as the header says)'),
  option('unit', 'Input', 'UNIT', 'unit of the velocities and their errors, m/s or km/s (default: as the header says, else m/s); of a light curve relative, counts, mag or ppm'),
  option('exposure', 'Input', 'TIME', 'length of the exposures of a light curve, e.g. "60 s" (default: as the table says, else the usual distance of its rows)'),
  option('band', 'Input', 'NAME', 'passband of a light curve (default: as the table says, else its name)'),
]; // prettier-ignore

export const TARGET_OPTION: OptionSpec = option('target', 'Input', 'NAME', 'name of the target (default: from the case, else the first table)'); // prettier-ignore

export const STAR_OPTIONS: readonly OptionSpec[] = [
  option('star-mass', 'Model', '"M +- S"', 'mass of the star, solar masses, e.g. "0.94 +- 0.03" (default: unknown, nothing derived that needs it)'),
  option('star-radius', 'Model', '"R +- S"', 'radius of the star, solar radii (default: unknown, nothing derived that needs it)'),
  option('star-temperature', 'Model', '"T +- S"', 'effective temperature of the star, K (default: unknown)'),
]; // prettier-ignore

export const MODEL_OPTIONS: readonly OptionSpec[] = [
  option('companions', 'Model', 'N', 'number of companions, 0 to 20, or auto: as many as the data pay for (default: auto)'),
  option('drift', 'Model', 'KIND', 'drift of the mean velocity: none, linear, quadratic or auto (default: auto)'),
  option('circular', 'Model', null, 'circular orbits only (default: the evidence decides)'),
]; // prettier-ignore

export const SEARCH_OPTIONS: readonly OptionSpec[] = [
  option('shortest-period', 'Search', 'DAYS', 'shortest period to look at, days (default: 0.5)'),
  option('longest-period', 'Search', 'DAYS', 'longest period to look at, days (default: 1.5 times the span of the velocities, half the span of the light curves)'),
  option('permutations', 'Search', 'N', 'shuffle the velocities N times for the false-alarm probability; 0 uses the analytic bound (default: 0)'),
]; // prettier-ignore

export const QUICK_OPTION: OptionSpec = option('quick', 'Uncertainty', null, 'no posterior: uncertainties from the curvature at the solution'); // prettier-ignore
export const DRAW_LIMIT_OPTION: OptionSpec = option('draw-limit', 'Uncertainty', 'N', 'most draws of the posterior per chain, a whole number from 1000; sampling ends sooner, once the chains have converged (default: 10000)'); // prettier-ignore
export const SEED_OPTION: OptionSpec = option('seed', 'Uncertainty', 'N', 'seed of all random numbers, a whole number from 0 (default: 1)'); // prettier-ignore

export const FORCE_OPTION: OptionSpec = option('force', 'Output', null, 'replace what an earlier run has written'); // prettier-ignore

export const TIMINGS_OPTION: OptionSpec = option('timings-out', 'Output', 'FILE', 'also write the mid-time of each transit of the light curves, measured by itself, as a table that timing reads; several companions get a file each, FILE with their letters (default: none)'); // prettier-ignore

export function outOption(help: string): OptionSpec {
  return option('out', 'Output', 'DIR', help);
}

/** Options of every command. */
export const COMMON_OPTIONS: readonly OptionSpec[] = [
  option('json', 'Output', null, 'print the result as JSON and nothing else'),
  option('quiet', 'Output', null, 'no progress and no warnings on standard error'),
  option('help', 'Help', null, 'print this help'),
  option('version', 'Help', null, 'print the version'),
];
