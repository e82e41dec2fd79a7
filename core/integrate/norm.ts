/** Sizes of vectors as the step control sees them: each entry against its own scale. */

/**
 * Turns scales into weights 1/scale, in place. A scale must be above zero; zero is taken for the least number there is.
 * @returns how many unknowns are controlled (have a finite scale)
 */
export function weightsFromScales(scales: Float64Array): number {
  let controlled = 0;
  for (let i = 0; i < scales.length; i++) {
    const scale = scales[i]!;
    if (scale !== Infinity) controlled++;
    scales[i] = 1 / Math.max(scale, 1e-300);
  }
  return controlled;
}

/** Root mean square of x_i w_i over the controlled unknowns, or the largest |x_i w_i|. */
export function weightedNorm(x: Float64Array, weight: Float64Array, controlled: number, norm: 'rms' | 'max'): number {
  let sum = 0;
  if (norm === 'rms') {
    for (let i = 0; i < x.length; i++) {
      const e = x[i]! * weight[i]!;
      sum += e * e;
    }
    return Math.sqrt(sum / Math.max(1, controlled));
  }
  for (let i = 0; i < x.length; i++) {
    const e = Math.abs(x[i]! * weight[i]!);
    if (!(e <= sum)) sum = e;
    if (e !== e) return NaN;
  }
  return sum;
}

/** Whether every entry is a number. Four sums, so that the processor need not wait for each addition. */
export function allFinite(x: Float64Array): boolean {
  const end = x.length - (x.length % 4);
  let [a, b, c, d] = [0, 0, 0, 0];
  for (let i = 0; i < end; i += 4) {
    a += x[i]!;
    b += x[i + 1]!;
    c += x[i + 2]!;
    d += x[i + 3]!;
  }
  for (let i = end; i < x.length; i++) a += x[i]!;
  return Number.isFinite(a + b + c + d);
}

/** Adds x to `sum` entry by entry; false where an entry of x is no number. */
export function addFinite(x: Float64Array, sum: Float64Array): boolean {
  const end = x.length - (x.length % 4);
  let [a, b, c, d] = [0, 0, 0, 0];
  for (let i = 0; i < end; i += 4) {
    const p = x[i]!;
    const q = x[i + 1]!;
    const r = x[i + 2]!;
    const s = x[i + 3]!;
    sum[i]! += p;
    sum[i + 1]! += q;
    sum[i + 2]! += r;
    sum[i + 3]! += s;
    a += p;
    b += q;
    c += r;
    d += s;
  }
  for (let i = end; i < x.length; i++) {
    sum[i]! += x[i]!;
    a += x[i]!;
  }
  return Number.isFinite(a + b + c + d);
}

/**
 * The unknown that most likely took a state out of what the laws allow: the first whose rate alone is not a number, or,
 * where all rates are lost, the one that moved farthest against its scale.
 */
export function suspect(rates: Float64Array, from: Float64Array, to: Float64Array, weight: Float64Array): number {
  let lost = 0;
  let first = 0;
  for (let i = rates.length - 1; i >= 0; i--) {
    if (Number.isFinite(rates[i]!)) continue;
    lost++;
    first = i;
  }
  if (lost > 0 && lost < rates.length) return first;
  let worst = 0;
  let farthest = 0;
  for (let i = 0; i < rates.length; i++) {
    const distance = Math.abs(to[i]! - from[i]!) * weight[i]!;
    if (distance <= farthest) continue;
    farthest = distance;
    worst = i;
  }
  return worst;
}
