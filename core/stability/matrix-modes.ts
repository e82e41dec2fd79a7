/**
 * Growing modes of a network from its whole Jacobian: for several gases coupled through matrices that no change of
 * variables makes symmetric. Dense, for a few hundred unknowns.
 * Sources: Parlett & Reinsch, Balancing a matrix (1969); QR algorithm, Golub & Van Loan, Matrix Computations, chapter 7.
 */

import { EigenvalueDecomposition, Matrix } from 'ml-matrix';

export interface MatrixModes {
  /** Number of eigenvalues whose real part exceeds `tolerance`. */
  readonly count: number;
  /** Largest real part among them, 1/s; 0 where nothing grows. */
  readonly fastestRate: number;
  /** Its angular frequency, rad/s; 0 for a mode that grows without swinging. */
  readonly frequency: number;
  /** The mode of the fastest, real part, in the unknowns of J, any scale; zeros where nothing grows. */
  readonly vector: Float64Array;
  /** Real part below which a rate cannot be told from 0, 1/s. */
  readonly tolerance: number;
}

/** Rounding of the QR algorithm against the norm of the balanced matrix, with room to spare. */
const RESOLUTION = 1e-13;

/**
 * Growing modes of `dx/dt = J x`.
 *
 * Every conserved total (one a species and connected closed part) is an exact zero of the spectrum that rounding moves:
 * so many eigenvalues of least size are set aside before counting.
 * @param jacobian row-major, size x size, 1/s; not written
 * @param conserved number of conserved totals
 * @throws RangeError where an entry is not finite
 */
export function growingModesOfMatrix(jacobian: Float64Array, size: number, conserved: number): MatrixModes {
  for (let k = 0; k < size * size; k++) {
    if (!Number.isFinite(jacobian[k]!)) throw new RangeError(`entry ${k} of the Jacobian is ${jacobian[k]!}`);
  }
  const vector = new Float64Array(size);
  if (size === 0) return { count: 0, fastestRate: 0, frequency: 0, vector, tolerance: 0 };
  const matrix = new Float64Array(jacobian.subarray(0, size * size));
  const scale = balance(matrix, size);
  let norm = 0;
  for (let k = 0; k < size * size; k++) norm += matrix[k]! * matrix[k]!;
  const tolerance = RESOLUTION * Math.sqrt(norm);
  const square = Matrix.from1DArray(size, size, matrix);
  const decomposition = new EigenvalueDecomposition(square);
  const real = decomposition.realEigenvalues;
  const imaginary = decomposition.imaginaryEigenvalues;
  const bySize = real
    .map((_, k) => k)
    .sort((a, b) => Math.hypot(real[a]!, imaginary[a]!) - Math.hypot(real[b]!, imaginary[b]!));
  let count = 0;
  let fastest = -1;
  for (const k of bySize.slice(conserved)) {
    if (!(real[k]! > tolerance)) continue;
    count++;
    if (fastest < 0 || real[k]! > real[fastest]!) fastest = k;
  }
  if (fastest < 0) return { count, fastestRate: 0, frequency: 0, vector, tolerance };
  // Of a complex pair the first column holds the real part.
  const column = imaginary[fastest]! < 0 && fastest > 0 ? fastest - 1 : fastest;
  for (let i = 0; i < size; i++) vector[i] = decomposition.eigenvectorMatrix.get(i, column) * scale[i]!;
  return { count, fastestRate: real[fastest]!, frequency: Math.abs(imaginary[fastest]!), vector, tolerance };
}

/** Makes rows and columns of like size by powers of two, in place; returns the scale of each unknown. */
function balance(matrix: Float64Array, size: number): Float64Array {
  const scale = new Float64Array(size).fill(1);
  for (let round = 0, changed = true; changed && round < 100; round++) {
    changed = false;
    for (let i = 0; i < size; i++) {
      let column = 0;
      let row = 0;
      for (let j = 0; j < size; j++) {
        if (j === i) continue;
        column += Math.abs(matrix[j * size + i]!);
        row += Math.abs(matrix[i * size + j]!);
      }
      if (column === 0 || row === 0) continue;
      const factor = 2 ** Math.round(Math.log2(row / column) / 2);
      if (factor === 1 || column * factor + row / factor >= 0.95 * (column + row)) continue;
      changed = true;
      scale[i]! *= factor;
      for (let j = 0; j < size; j++) {
        matrix[i * size + j]! /= factor;
        matrix[j * size + i]! *= factor;
      }
    }
  }
  return scale;
}
