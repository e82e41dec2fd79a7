/**
 * Gases by name: those of the file, filled in from the built-in ones, and the compositions that refer to them.
 */
import { formatQuantity } from '../quantities/format.ts';
import { GAS_PROPERTIES, GAS_TEMPERATURE, GASES, type GasProperty } from '../substances/gases.ts';
import type { FaultList } from './fault-list.ts';
import { isName } from './fields.ts';
import { isRecord, pathTo, showValue } from './path.ts';
import { readRecord, type Reading } from './reading.ts';
import { gasDocument, type GasDocument } from './recipe-document.ts';
import type { Composition, Gas } from './schema.ts';

/** What the file defines under `gases`. */
export type GasReadings = ReadonlyMap<string, Reading<GasDocument>>;

/** Reads a section of the file that holds records by name. */
export function readNamed<Fields>(
  section: string,
  what: string,
  value: unknown,
  list: FaultList,
  read: (value: unknown, path: string) => Reading<Fields>,
): ReadonlyMap<string, Reading<Fields>> {
  const readings = new Map<string, Reading<Fields>>();
  if (value === undefined) return readings;
  if (!isRecord(value)) {
    list.error(section, 'type', `${showValue(value)} stands here; ${what} by name is needed`, { actual: value });
    return readings;
  }
  for (const [name, entry] of Object.entries(value)) {
    const path = pathTo(section, name);
    if (!isName(name)) list.error(path, 'name', `${showValue(name)} cannot be a name here`, { actual: name });
    else readings.set(name, read(entry, path));
  }
  return readings;
}

export function readGases(value: unknown, list: FaultList): GasReadings {
  return readNamed('gases', 'gases', value, list, (entry, path) => readRecord('a gas', gasDocument, entry, path, list));
}

/** The gases a file may name: its own first, then the built-in ones. */
export function knownGases(defined: GasReadings): readonly string[] {
  return [...new Set([...defined.keys(), ...GASES.keys()])];
}

/** A gas as the file defines it, each property that it leaves out filled in from the built-in gas of that name. */
export function resolveGas(name: string, reading: Reading<GasDocument> | undefined): Gas {
  const fields = reading?.fields ?? {};
  const builtIn = GASES.get(name);
  const sources = fields.source === undefined ? [] : [fields.source];
  const value = (property: GasProperty): number | null => {
    const own = fields[property];
    if (own !== undefined) return own;
    if (builtIn === undefined) return null;
    sources.push(`${property}: ${builtIn[property].source}`);
    return builtIn[property].value;
  };
  const [molarMass, viscosity, diffusivity, solubility] = GAS_PROPERTIES.map(value) as Four;
  return { molarMass, viscosity, diffusivity, solubility, source: sources.length === 0 ? null : sources.join('; ') };
}
type Four = [number | null, number | null, number | null, number | null];

/** The built-in values hold at 25 degC: says so where a run is more than this far from it, K. */
export const FAR_FROM_TABLE = 10;

export function warnOfTemperature(
  names: readonly string[],
  defined: GasReadings,
  temperature: number,
  list: FaultList,
): void {
  if (Math.abs(temperature - GAS_TEMPERATURE) <= FAR_FROM_TABLE) return;
  for (const name of names) {
    if (!GASES.has(name)) continue;
    const filled = GAS_PROPERTIES.slice(1).filter((property) => defined.get(name)?.fields[property] === undefined);
    if (filled.length === 0) continue;
    const message = `${filled.join(', ')} built in for 25 °C are used at ${formatQuantity(temperature, 'temperature')}; give them for that temperature`;
    list.warn(pathTo('gases', name), 'temperature', message);
  }
}

export interface Species {
  /** In the order of all compositions. */
  readonly names: readonly string[];
  /** What a file may name. */
  readonly known: readonly string[];
  /** The gas of a node that names none; null where there is not exactly one. */
  readonly only: string | null;
}

/** Sums that differ from 1 by rounding alone are left as they are, so that a saved file loads to the same numbers. */
const ROUNDING = 1e-12;
const WORTH_A_WARNING = 1e-6;

/**
 * Mole fractions in the order of `species.names`, brought to a sum of 1; null where a fault prevents it.
 * @param written by name; undefined where the file gives none
 */
export function resolveComposition(
  written: Readonly<Record<string, number>> | undefined,
  path: string,
  species: Species,
  list: FaultList,
): Composition | null {
  if (written === undefined) {
    if (species.only !== null) return species.names.map((name) => (name === species.only ? 1 : 0));
    const message = 'missing; shares of gases such as {"air": 1} are needed, as the file does not name one gas only';
    list.error(path, 'missing', message, { expected: 'shares of gases' });
    return null;
  }
  const unknown = Object.keys(written).filter((name) => !species.known.includes(name));
  for (const name of unknown) {
    const near = list.suggestion(name, species.known);
    list.error(
      pathTo(path, name),
      'unknown-gas',
      `${showValue(name)} is no gas of this file, nor a built-in one${near}`,
      {
        actual: written[name],
        expected: 'the name of a gas',
      },
    );
  }
  if (unknown.length > 0) return null;
  const shares = species.names.map((name) => (Object.hasOwn(written, name) ? written[name]! : 0));
  const sum = shares.reduce((total, share) => total + share, 0);
  if (!(sum > 0 && sum < Infinity)) {
    list.error(path, 'range', 'the shares do not add up to anything; at least one share above 0 is needed');
    return null;
  }
  if (Math.abs(sum - 1) <= ROUNDING) return shares;
  if (Math.abs(sum - 1) > WORTH_A_WARNING) {
    list.warn(path, 'sum', `the shares add up to ${Number(sum.toPrecision(6))}; they are divided by that sum`, {
      expected: 'a sum of 1',
    });
  }
  return shares.map((share) => share / sum);
}
