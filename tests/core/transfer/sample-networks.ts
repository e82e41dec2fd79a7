/**
 * Small networks made from scenario documents as a user would write them, for the tests of links and of the network's rates:
 * everything that is asked of a kernel here has come through the loader and the compiler.
 */
import { compileScenario, type CompiledStart } from '../../../core/network/compile.ts';
import type { Network } from '../../../core/network/network.ts';
import type { AssembledMatrix } from '../../../core/integrate/linear/assembled.ts';
import { createNetworkSystem, type NetworkSystem } from '../../../core/run/system.ts';
import { loadScenario } from '../../../core/scenario/load.ts';

export const TOLERANCE = 1e-6;

/** The parts of a document that differ from sample to sample. */
export interface DocumentParts {
  readonly nodes: readonly unknown[];
  readonly links?: readonly unknown[];
  readonly ambient?: unknown;
  readonly temperature?: unknown;
  readonly gases?: unknown;
  readonly recipes?: unknown;
}

export interface Sample {
  readonly network: Network;
  readonly start: CompiledStart;
  readonly system: NetworkSystem;
  /** mol at the start; a copy, free to be changed. */
  readonly y: Float64Array;
  /** Index of a node by its id. */
  node(id: string): number;
  /** Molar flow of a link by its id at (t, y), per species. */
  flow(id: string, t?: number): Float64Array;
  conductance(id: string, t?: number): Float64Array;
  rates(t?: number): Float64Array;
  /** Index of a link inside its group, and the group's index. */
  place(id: string): { readonly group: number; readonly link: number };
}

/** Loads, compiles and makes the system; throws with the faults where the document has any. */
export function sample(parts: DocumentParts): Sample {
  const loaded = loadScenario(JSON.stringify({ format: 'frothwright', version: 1, run: { until: 1 }, ...parts }));
  if (!loaded.ok) throw new Error(loaded.faults.map(({ path, message }) => `${path}: ${message}`).join('\n'));
  const compiled = compileScenario(loaded.scenario);
  if ('faults' in compiled)
    throw new Error(compiled.faults.map(({ path, message }) => `${path}: ${message}`).join('\n'));
  const { start } = compiled;
  const { network } = start;
  const system = createNetworkSystem(network, TOLERANCE, start.pressureSignal);
  const y = start.amounts.slice();
  system.state.size.set(start.sizes);

  const place: Sample['place'] = (id) => {
    for (let group = 0; group < network.links.length; group++) {
      const link = network.links[group]!.origin.findIndex((origin) => network.linkName(origin) === id);
      if (link >= 0) return { group, link };
    }
    throw new Error(`no link ${id}`);
  };
  const ask =
    (what: 'flow' | 'conductance') =>
    (id: string, t = 0): Float64Array => {
      if (!system.evaluate(t, y, false)) throw new Error('a bubble without a state');
      const { group, link } = place(id);
      const out = new Float64Array(network.species.length);
      system.groups[group]!.kernel[what](system.groups[group]!.group, link, system.state, t, out);
      return out;
    };
  return {
    network,
    start,
    system,
    y,
    place,
    node(id) {
      const found = network.nodes.origin.findIndex((origin) => network.nodeName(origin) === id);
      if (found < 0) throw new Error(`no node ${id}`);
      return found;
    },
    flow: ask('flow'),
    conductance: ask('conductance'),
    rates(t = 0) {
      const out = new Float64Array(system.size);
      system.rates(t, y, out);
      return out;
    },
  };
}

/** What `linearise` leaves at (t, y), the Jacobian written out row by row. */
export function linearised(
  system: NetworkSystem,
  t: number,
  y: Float64Array,
): { rates: Float64Array; timeDerivative: Float64Array; jacobian: number[][] } {
  const { size } = system;
  const rates = new Float64Array(size);
  const timeDerivative = new Float64Array(size);
  const matrix = system.matrix as AssembledMatrix;
  // A bubble's slopes are those at its last Newton iterate, up to 1e-8 of its size away (core/network/shaped.ts). Asked twice for
  // one state the iterate is the root itself.
  system.evaluate(t, y, false);
  system.linearise(t, y, rates, timeDerivative);
  const jacobian = Array.from({ length: size }, (_, row) =>
    Array.from({ length: size }, (_, column) => {
      const slot = matrix.slot(row, column);
      return slot < 0 ? 0 : matrix.values[slot]!;
    }),
  );
  return { rates, timeDerivative, jacobian };
}

/** Two cavities with a tube between them, of the bore, length and gas of the test. */
export function tubeBetweenCavities(
  pressures: readonly [number, number],
  tube: { readonly bore?: number; readonly length?: number; readonly viscosity?: number } = {},
  gases: readonly [unknown, unknown] = [{ air: 1 }, { air: 1 }],
): Sample {
  return sample({
    nodes: [
      { id: 'A', kind: 'cavity', volume: '1 mL', pressure: pressures[0], gas: gases[0] },
      { id: 'B', kind: 'cavity', volume: '2 mL', pressure: pressures[1], gas: gases[1] },
    ],
    links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore: '2 mm', length: '20 mm', ...tube }],
  });
}
