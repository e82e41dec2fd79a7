/**
 * General sparse matrices: one order of elimination and one pattern of fill for the matrix's whole life, then LU without
 * exchange of rows, row by row. Columns of shift I - J are diagonally dominant except where bubbles run away within the step;
 * there the pivots are watched, and a step whose pivots cannot be trusted is made shorter.
 */
import { SMALLEST_PIVOT, type AssembledMatrix } from './assembled.ts';
import { eliminationOrder } from './ordering.ts';
import { buildPattern } from './pattern.ts';
import { factorPattern } from './symbolic.ts';

/** Entries that grow beyond this many times the largest of their column have lost too many digits. */
const MOST_GROWTH = 1e6;

/**
 * @param rows,columns entries that may be other than zero; the pattern is made symmetric and given its diagonal
 */
export function createSparse(n: number, rows: Int32Array, columns: Int32Array): AssembledMatrix {
  const pattern = buildPattern(n, rows, columns);
  const order = eliminationOrder(pattern);
  const position = new Int32Array(n);
  order.forEach((i, k) => (position[i] = k));
  const { upperStart, upper, lowerStart, lower } = factorPattern(pattern, order, position);

  // J by rows in the order of elimination, its columns as positions, the diagonal among them.
  const rowStart = new Int32Array(n + 1);
  for (let k = 0; k < n; k++) {
    const i = order[k]!;
    rowStart[k + 1] = rowStart[k]! + 1 + pattern.start[i + 1]! - pattern.start[i]!;
  }
  const rowColumns = new Int32Array(rowStart[n]!);
  for (let k = 0; k < n; k++) {
    const i = order[k]!;
    const row = rowColumns.subarray(rowStart[k], rowStart[k + 1]);
    row[0] = k;
    for (let e = pattern.start[i]!, q = 1; e < pattern.start[i + 1]!; e++, q++)
      row[q] = position[pattern.neighbours[e]!]!;
    row.sort();
  }
  const values = new Float64Array(rowStart[n]!);
  const L = new Float64Array(lowerStart[n]!);
  const U = new Float64Array(upperStart[n]!);
  const inverse = new Float64Array(n); // 1 over U's diagonal
  const columnSizes = new Float64Array(n);
  const work = new Float64Array(n); // zero between rows
  const permuted = new Float64Array(n);

  function measureColumns(shift: number): void {
    columnSizes.fill(0);
    for (let k = 0; k < n; k++) {
      for (let e = rowStart[k]!; e < rowStart[k + 1]!; e++) {
        const c = rowColumns[e]!;
        const size = Math.abs(c === k ? shift - values[e]! : values[e]!);
        if (size > columnSizes[c]!) columnSizes[c] = size;
      }
    }
  }

  return {
    size: n,
    values,
    clear: () => values.fill(0),

    slot(row, column) {
      const k = position[row]!;
      const wanted = position[column]!;
      let low = rowStart[k]!;
      let high = rowStart[k + 1]! - 1;
      while (low <= high) {
        const middle = (low + high) >> 1;
        const c = rowColumns[middle]!;
        if (c === wanted) return middle;
        if (c < wanted) low = middle + 1;
        else high = middle - 1;
      }
      return -1;
    },

    factor(shift) {
      measureColumns(shift);
      for (let k = 0; k < n; k++) {
        for (let e = rowStart[k]!; e < rowStart[k + 1]!; e++) work[rowColumns[e]!] = -values[e]!;
        work[k]! += shift;
        let steepest = 0;
        for (let e = lowerStart[k]!; e < lowerStart[k + 1]!; e++) {
          const j = lower[e]!;
          const factor = work[j]! * inverse[j]!;
          work[j] = 0;
          L[e] = factor;
          if (factor === 0) continue;
          const size = Math.abs(factor);
          if (!(size <= steepest)) steepest = size;
          for (let g = upperStart[j]!; g < upperStart[j + 1]!; g++) work[upper[g]!]! -= factor * U[g]!;
        }
        let grown = false;
        for (let g = upperStart[k]!; g < upperStart[k + 1]!; g++) {
          const c = upper[g]!;
          const u = work[c]!;
          work[c] = 0;
          U[g] = u;
          // An entry that fills in where its column has none so far is measured against the column's own largest too.
          if (!(Math.abs(u) <= MOST_GROWTH * columnSizes[c]!)) grown = true;
        }
        const pivot = work[k]!;
        work[k] = 0;
        const trusted = Math.abs(pivot) > SMALLEST_PIVOT * columnSizes[k]! && steepest < 1 / SMALLEST_PIVOT && !grown;
        if (!trusted || !Number.isFinite(pivot)) return false;
        inverse[k] = 1 / pivot;
      }
      return true;
    },

    solve(x) {
      for (let k = 0; k < n; k++) {
        let sum = x[order[k]!]!;
        for (let e = lowerStart[k]!; e < lowerStart[k + 1]!; e++) sum -= L[e]! * permuted[lower[e]!]!;
        permuted[k] = sum;
      }
      for (let k = n - 1; k >= 0; k--) {
        let sum = permuted[k]!;
        for (let g = upperStart[k]!; g < upperStart[k + 1]!; g++) sum -= U[g]! * permuted[upper[g]!]!;
        sum *= inverse[k]!;
        permuted[k] = sum;
        x[order[k]!] = sum;
      }
    },
  };
}
