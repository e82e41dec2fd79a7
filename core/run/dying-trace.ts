/**
 * What dying bubbles did during a step, to be read at any instant of it: the pieces of their integration, each with the dense
 * output of Tsitouras' pair. A piece goes along time, or along the radius of a lone bubble, with time in the place of s.
 */
import { TSIT5 } from '../integrate/tableaus/tsit5.ts';

const { stages: STAGES, dense } = TSIT5;

export interface DyingTrace {
  clear(): void;
  /**
   * Adds a piece that ends at `until`.
   * @param along radius at which the piece begins, m, where it goes along the radius; NaN where it goes along time
   * @param step its length, in s or m
   * @param count unknowns of z and of each stage to keep, the same in all pieces
   */
  add(
    from: number,
    until: number,
    along: number,
    step: number,
    z: readonly number[],
    stages: readonly number[][],
    count: number,
  ): void;
  /** Writes s and mole fractions at tau into `out`; past the last piece, those of its end. */
  read(tau: number, out: number[]): void;
  readonly pieces: number;
}

export function createDyingTrace(): DyingTrace {
  let pieces = 0;
  let width = 0;
  const from: number[] = [];
  const until: number[] = [];
  const along: number[] = [];
  const length: number[] = [];
  const kept: number[] = []; // (1 + STAGES) * width a piece

  /** z_d + step sum_j b_j(theta) k_j,d */
  function dial(piece: number, theta: number, d: number): number {
    const base = piece * (1 + STAGES) * width;
    let sum = 0;
    for (let j = 0; j < STAGES; j++) {
      const r = dense[j]!;
      sum += theta * (r[0] + theta * (r[1] + theta * (r[2] + theta * r[3]))) * kept[base + (1 + j) * width + d]!;
    }
    return kept[base + d]! + length[piece]! * sum;
  }

  return {
    clear() {
      pieces = 0;
    },
    get pieces() {
      return pieces;
    },

    add(start, end, radius, step, z, stages, count) {
      width = count;
      from[pieces] = start;
      until[pieces] = end;
      along[pieces] = radius;
      length[pieces] = step;
      let at = pieces * (1 + STAGES) * width;
      for (let d = 0; d < width; d++) kept[at++] = z[d]!;
      for (let j = 0; j < STAGES; j++) for (let d = 0; d < width; d++) kept[at++] = stages[j]![d]!;
      pieces++;
    },

    read(tau, out) {
      let piece = 0;
      while (piece + 1 < pieces && until[piece]! <= tau) piece++;
      const begin = from[piece]!;
      const span = until[piece]! - begin;
      let theta = span > 0 ? Math.min(1, Math.max(0, (tau - begin) / span)) : 1;
      if (Number.isNaN(along[piece]!)) {
        for (let d = 0; d < width; d++) out[d] = dial(piece, theta, d);
        return;
      }
      // Time grows along the piece: halve to where it is tau.
      let [low, high] = [0, 1];
      for (let pass = 0; pass < 60 && high - low > 1e-15; pass++) {
        theta = 0.5 * (low + high);
        if (dial(piece, theta, 0) < tau) low = theta;
        else high = theta;
      }
      const R = along[piece]! + theta * length[piece]!;
      out[0] = R * R;
      for (let d = 1; d < width; d++) out[d] = dial(piece, theta, d);
    },
  };
}
