/** The order of elimination: it changes no result, and it is there to keep fill small. */
import { describe, expect, it } from 'vitest';
import { eliminationOrder } from '../../../../core/integrate/linear/ordering.ts';
import { buildPattern } from '../../../../core/integrate/linear/pattern.ts';
import { factorPattern } from '../../../../core/integrate/linear/symbolic.ts';

/** Links of a square lattice of bubbles. */
function lattice(side: number): { rows: Int32Array; columns: Int32Array } {
  const rows: number[] = [];
  const columns: number[] = [];
  for (let i = 0; i < side * side; i++) {
    if (i % side < side - 1) {
      rows.push(i);
      columns.push(i + 1);
    }
    if (i < side * (side - 1)) {
      rows.push(i);
      columns.push(i + side);
    }
  }
  return { rows: Int32Array.from(rows), columns: Int32Array.from(columns) };
}

function fill(size: number, links: { rows: Int32Array; columns: Int32Array }, order: Int32Array | null): number {
  const pattern = buildPattern(size, links.rows, links.columns);
  const chosen = order ?? eliminationOrder(pattern);
  const position = new Int32Array(size);
  chosen.forEach((i, k) => (position[i] = k));
  return factorPattern(pattern, chosen, position).upper.length;
}

describe('the order of elimination', () => {
  it('takes every unknown once', () => {
    const { rows, columns } = lattice(15);
    const order = eliminationOrder(buildPattern(225, rows, columns));
    expect([...order].sort((a, b) => a - b)).toEqual(Array.from({ length: 225 }, (_, i) => i));
  });

  it('fills in a third of what the order of numbering would, on a lattice of 40 by 40', () => {
    // Numbered row by row a lattice fills its band, n^1.5 entries; minimum degree stays near n log n.
    const size = 1600;
    const natural = fill(
      size,
      lattice(40),
      Int32Array.from({ length: size }, (_, i) => i),
    );
    expect(natural).toBeGreaterThan(39 * 39 * 40);
    expect(fill(size, lattice(40), null)).toBeLessThan(natural / 3);
  });

  it('fills in nothing on a chain, a star and a tree', () => {
    const tree = { rows: new Int32Array(199), columns: new Int32Array(199) };
    for (let i = 1; i < 200; i++) {
      tree.rows[i - 1] = i;
      tree.columns[i - 1] = Math.floor((i - 1) / 2);
    }
    const chain = {
      rows: Int32Array.from({ length: 199 }, (_, i) => i),
      columns: Int32Array.from({ length: 199 }, (_, i) => i + 1),
    };
    const star = { rows: new Int32Array(199), columns: Int32Array.from({ length: 199 }, (_, i) => i + 1) };
    for (const links of [tree, chain, star]) expect(fill(200, links, null)).toBe(199);
  });

  it('leaves a pool that everything touches to the end', () => {
    const size = 2001;
    const rows = Int32Array.from({ length: 2000 }, (_, i) => i);
    const columns = new Int32Array(2000).fill(2000);
    expect(eliminationOrder(buildPattern(size, rows, columns)).at(-1)).toBe(2000);
  });
});
