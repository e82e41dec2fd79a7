import type { StepperOptions } from './owned-stepper.ts';
import type { System } from '../integrate/system.ts';

const SAFETY = 0.9;
const MOST_GROWTH = 6;
const MOST_SHRINK = 0.2;
export function growth(norm: number, before: number, order: number): number {
  if (norm === 0) return MOST_GROWTH;
  const factor = SAFETY * Math.pow(norm, -0.7 / order) * Math.pow(Math.max(before, 1e-4), 0.4 / order);
  return Math.min(MOST_GROWTH, Math.max(MOST_SHRINK, factor));
}
export function shrinkage(norm: number, order: number): number {
  if (!(norm < Infinity)) return 0.25;
  return Math.max(MOST_SHRINK, Math.min(0.9, SAFETY * Math.pow(norm, -1 / order)));
}
export function fitStep(t: number, h: number, limit: number): number {
  const left = limit - t;
  if (h >= left * (1 - 1e-9)) return left;
  return 2 * h > left ? 0.5 * left : h;
}
export function errorNorm(error: Float64Array, scale: Float64Array, norm: StepperOptions['norm']): number {
  const n = error.length;
  if (norm === 'max') {
    let worst = 0;
    for (let i = 0; i < n; i++) {
      const e = Math.abs(error[i]!) / scale[i]!;
      if (!(e <= worst)) worst = e;
      if (worst !== worst) return NaN;
    }
    return worst;
  }
  let sum = 0;
  let count = 0;
  for (let i = 0; i < n; i++) {
    const s = scale[i]!;
    if (s === Infinity) continue;
    const e = error[i]! / s;
    sum += e * e;
    count++;
  }
  return count === 0 ? 0 : Math.sqrt(sum / count);
}
export function worstUnknown(error: Float64Array, scale: Float64Array): number {
  let at = 0;
  let worst = -1;
  for (let i = 0; i < error.length; i++) {
    const e = Math.abs(error[i]!) / scale[i]!;
    if (Number.isNaN(e) && scale[i] !== Infinity) return i;
    if (e > worst) {
      worst = e;
      at = i;
    }
  }
  return at;
}
export function startingStep(system: System, t: number, y: Float64Array, slope: Float64Array, scale: Float64Array, order: number, longest: number, scratch: Float64Array, scratchRates: Float64Array): number {
  const d0 = errorNorm(y, scale, 'rms');
  const d1 = errorNorm(slope, scale, 'rms');
  let h0 = d0 < 1e-5 || d1 < 1e-5 ? 1e-6 * longest : (0.01 * d0) / d1;
  h0 = Math.min(h0, longest);
  if (!(h0 > 0)) return 1e-6 * longest;
  for (let i = 0; i < y.length; i++) scratch[i] = y[i]! + h0 * slope[i]!;
  system.rates(t + h0, scratch, scratchRates);
  for (let i = 0; i < y.length; i++) scratch[i] = scratchRates[i]! - slope[i]!;
  const d2 = errorNorm(scratch, scale, 'rms') / h0;
  if (!Number.isFinite(d2)) return 1e-3 * h0;
  const steepest = Math.max(d1, d2);
  const h1 = steepest <= 1e-15 ? Math.max(1e-6 * longest, 1e-3 * h0) : Math.pow(0.01 / steepest, 1 / order);
  return Math.min(100 * h0, h1, longest);
}
export function shortestStep(t: number): number {
  return 16 * Number.EPSILON * Math.abs(t) + 1e-290;
}
