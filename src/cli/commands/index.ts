/** The commands in the order of the help; a new command is one file and its line here. */
import type { Command } from '../command.js';
import { check } from './check.js';
import { mock } from './mock.js';
import { periods } from './periods.js';
import { solve } from './solve.js';
import { timing } from './timing.js';

export const COMMANDS: readonly Command[] = [check, periods, solve, timing, mock];
