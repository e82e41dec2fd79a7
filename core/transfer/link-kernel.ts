/**
 * What every kind of link offers to the rest of the house. A kind is one file that makes a kernel, and one line in `register.ts`.
 */
import type { LinkTable } from '../network/network.ts';
import type { NodeState } from '../network/node-state.ts';

/** The links of one kind, with the ones that carry gas at present listed in `active[0 .. activeCount)`. */
export interface LinkGroup {
  readonly table: LinkTable;
  readonly active: Int32Array;
  activeCount: number;
  /**
   * Places in the Jacobian's values of the entries of each link, 4 * species^2 a link, in the order
   * (from,from) (to,from) (from,to) (to,to), each block row by row over species; empty until the matrix exists.
   */
  slots: Int32Array;
}

export interface LinkKernel {
  /** Adds the molar flow of every active link to `out` (mol/s): minus at `from`, plus at `to`. */
  addRates(group: LinkGroup, state: NodeState, t: number, out: Float64Array): void;
  /** Adds d(rates)/dy to `values` at the group's slots, and d(rates)/dt at constant y to `timeDerivative`. */
  addSlopes(group: LinkGroup, state: NodeState, t: number, values: Float64Array, timeDerivative: Float64Array): void;
  /** Molar flow of one link, `from` to `to`, per species (mol/s), written to `out`. */
  flow(group: LinkGroup, link: number, state: NodeState, t: number, out: Float64Array): void;
  /** Molar conductance of one link per species, flow per pressure difference, mol/(s Pa), written to `out`; whole gas in out[0] for a tube. */
  conductance(group: LinkGroup, link: number, state: NodeState, t: number, out: Float64Array): void;
  /** True where the link lets each species through by its own partial pressure; false where it carries the gas whole. */
  readonly diffusive: boolean;
}

/** Makes a group with every link of the table active. */
export function createLinkGroup(table: LinkTable): LinkGroup {
  return {
    table,
    active: Int32Array.from({ length: table.count }, (_, l) => l),
    activeCount: table.count,
    slots: new Int32Array(0),
  };
}
