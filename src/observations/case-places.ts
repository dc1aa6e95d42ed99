/**
 * Where a case file names each instrument and each band. A case is a plain value without places; these are needed once
 * more, when the tables are there to hold the names against. They follow the choices through copies of the case.
 */
import type { Place, YamlText } from './case-yaml.js';

const places = new WeakMap<object, ReadonlyMap<string, Place>>();

/** Remembers the place of every key of `choices`, which was read from the mapping `section` of the file. */
export function rememberPlaces(choices: object, section: string, yaml: YamlText): void {
  places.set(choices, new Map(Object.keys(choices).map((name) => [name, yaml.placeOfKey([section], name)])));
}

export function placeOfChoice(choices: object, name: string): Place | undefined {
  return places.get(choices)?.get(name);
}
