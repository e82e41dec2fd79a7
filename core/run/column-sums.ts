/**
 * How fast the fastest mode of a network can be, from its links alone: no matrix is built, so that a bed of 10^5 contacts is
 * asked in a millisecond whether it is stiff.
 */
import type { NodeState } from '../network/node-state.ts';
import type { LinkGroup, LinkKernel } from '../transfer/link-kernel.ts';

/**
 * @returns from node states with slopes, the largest sum of sizes in a column of the Jacobian, 1/s, the links' shares of an entry
 * summed without their signs: never less than the true column sum. Where every bubble runs away, or every one pushes back, it is at most
 * twice the fastest rate; near-neutral mixtures are taken for faster than they are
 */
export function createColumnSums(
  size: number,
  species: number,
  groups: readonly { readonly group: LinkGroup; readonly kernel: LinkKernel }[],
): (state: NodeState, t: number) => number {
  const block = species * species;
  const sums = new Float64Array(size);
  const ignored = new Float64Array(size);
  const parts = groups.map(({ group, kernel }) => ({
    group,
    kernel,
    // Every link keeps its four blocks to itself.
    apart: Int32Array.from({ length: 4 * block * group.table.count }, (_, s) => s),
    values: new Float64Array(4 * block * group.table.count),
  }));

  return (state, t) => {
    sums.fill(0);
    for (const { group, kernel, apart, values } of parts) {
      values.fill(0);
      kernel.addSlopes({ ...group, slots: apart }, state, t, values, ignored);
      const { from, to } = group.table;
      for (let q = 0; q < group.activeCount; q++) {
        const l = group.active[q]!;
        for (let quarter = 0; quarter < 4; quarter++) {
          const column = (quarter & 2 ? to[l]! : from[l]!) * species;
          const base = (4 * l + quarter) * block;
          for (let e = 0; e < block; e++) sums[column + (e % species)]! += Math.abs(values[base + e]!);
        }
      }
    }
    let largest = 0;
    for (let u = 0; u < size; u++) if (!(sums[u]! <= largest)) largest = sums[u]!;
    return largest;
  };
}
