/**
 * Arrow matrices: every entry off the diagonal lies in the row or the column of one of a few hubs (a pool, a cavity, an account).
 * The others are eliminated one by one without fill, in O(n hubs); the hubs' own small matrix is solved dense.
 *
 * With W = shift I - J, d_i its diagonal, p_a = row a and c_b = column b of J for hubs a and b:
 *   S_ab = W_ab - sum_i p_a,i c_b,i/d_i,   S x_hub = b_hub + sum_i p_a,i b_i/d_i,   x_i = b_i/d_i + sum_b (c_b,i/d_i) x_b
 *
 * All runs have the full length n and are zero at the hubs' own places, so no loop looks anything up.
 */
import { SMALLEST_PIVOT, type AssembledMatrix } from './assembled.ts';
import { factorDense, solveDense } from './dense.ts';

/**
 * @param hubs the unknowns whose rows and columns may be full
 */
export function createArrow(n: number, hubs: readonly number[]): AssembledMatrix {
  const m = hubs.length;
  const place = new Int32Array(n).fill(-1);
  hubs.forEach((hub, a) => (place[hub] = a));
  // values: diagonal [n], the hubs' columns [m n], their rows [m n], their own block [m m].
  const values = new Float64Array(n + 2 * m * n + m * m);
  const diagonal = values.subarray(0, n);
  const columns = hubs.map((_, a) => values.subarray((1 + a) * n, (2 + a) * n));
  const rows = hubs.map((_, a) => values.subarray((1 + m + a) * n, (2 + m + a) * n));
  const blockStart = n + 2 * m * n;
  const block = values.subarray(blockStart);
  const inverse = new Float64Array(n); // 1/d
  const scaled = hubs.map(() => new Float64Array(n)); // c/d
  const schur = new Float64Array(m * m);
  const columnSizes = new Float64Array(m);
  const pivots = new Int32Array(m);
  const atHubs = new Float64Array(m);

  /** Writes 1/d; false where the pivot is too small against what it must eliminate. */
  function invertDiagonal(shift: number): boolean {
    const least = SMALLEST_PIVOT * shift;
    for (let i = 0; i < n; i++) {
      const d = shift - diagonal[i]!;
      if (!(Math.abs(d) > least)) return false;
      inverse[i] = 1 / d;
    }
    for (const p of rows) {
      for (let i = 0; i < n; i++) if (!(Math.abs(p[i]! * inverse[i]!) < 1 / SMALLEST_PIVOT)) return false;
    }
    return true;
  }

  /** Multiplies x by 1/d and adds up the hubs' rows times the result: two hubs in one sweep. */
  function eliminate(x: Float64Array): void {
    if (m === 0) {
      for (let i = 0; i < n; i++) x[i]! *= inverse[i]!;
      return;
    }
    const p = rows[0]!;
    const q = m > 1 ? rows[1]! : null;
    let first = 0;
    let second = 0;
    if (q === null) {
      for (let i = 0; i < n; i++) {
        const v = x[i]! * inverse[i]!;
        x[i] = v;
        first += p[i]! * v;
      }
    } else {
      for (let i = 0; i < n; i++) {
        const v = x[i]! * inverse[i]!;
        x[i] = v;
        first += p[i]! * v;
        second += q[i]! * v;
      }
      atHubs[1]! += second;
    }
    atHubs[0]! += first;
    for (let a = 2; a < m; a++) {
      const r = rows[a]!;
      let sum = 0;
      for (let i = 0; i < n; i++) sum += r[i]! * x[i]!;
      atHubs[a]! += sum;
    }
  }

  /** Adds the hubs' columns over d, times the hubs' solution: two hubs in one sweep. */
  function substitute(x: Float64Array): void {
    for (let b = 0; b < m; b += 2) {
      const s = scaled[b]!;
      const u = atHubs[b]!;
      if (b + 1 < m) {
        const t = scaled[b + 1]!;
        const v = atHubs[b + 1]!;
        for (let i = 0; i < n; i++) x[i]! += s[i]! * u + t[i]! * v;
      } else {
        for (let i = 0; i < n; i++) x[i]! += s[i]! * u;
      }
    }
  }

  return {
    size: n,
    values,
    clear: () => values.fill(0),

    slot(row, column) {
      const a = place[row]!;
      const b = place[column]!;
      if (a >= 0 && b >= 0) return blockStart + a * m + b;
      if (b >= 0) return (1 + b) * n + row;
      if (a >= 0) return (1 + m + a) * n + column;
      return row === column ? row : -1;
    },

    factor(shift) {
      if (!invertDiagonal(shift)) return false;
      for (let b = 0; b < m; b++) {
        const c = columns[b]!;
        const s = scaled[b]!;
        let largest = 0;
        for (let i = 0; i < n; i++) {
          const entry = c[i]!;
          s[i] = entry * inverse[i]!;
          const size = Math.abs(entry);
          if (size > largest) largest = size;
        }
        for (let a = 0; a < m; a++) {
          const p = rows[a]!;
          let sum = 0;
          for (let i = 0; i < n; i++) sum += p[i]! * s[i]!;
          const entry = (a === b ? shift : 0) - block[a * m + b]!;
          largest = Math.max(largest, Math.abs(entry));
          schur[a * m + b] = entry - sum;
        }
        columnSizes[b] = largest;
      }
      return factorDense(schur, m, columnSizes, pivots);
    },

    solve(x) {
      for (let a = 0; a < m; a++) atHubs[a] = x[hubs[a]!]!;
      eliminate(x);
      solveDense(schur, m, pivots, atHubs);
      substitute(x);
      for (let a = 0; a < m; a++) x[hubs[a]!] = atHubs[a]!;
    },
  };
}
