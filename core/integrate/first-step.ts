/**
 * The length of a first step, from the size of the state, its rates and how fast they change.
 * Source: Hairer, Norsett & Wanner, Solving ODEs I, section II.4, "Starting step size".
 */
import { allFinite, weightedNorm } from './norm.ts';
import type { System } from './system.ts';

/**
 * @param rates f(t, y)
 * @param weight 1/scale per unknown, `controlled` of them not zero
 * @param longest the step may not be longer, s
 * @param order the power of h with which the method's error estimate goes
 * @param trial,trialRates scratch, each of the system's size
 * @returns a step size in (0, longest], s; costs at least one evaluation of the rates, counted by the caller's `counter`
 */
export function chooseFirstStep(
  system: System,
  t: number,
  y: Float64Array,
  rates: Float64Array,
  weight: Float64Array,
  controlled: number,
  longest: number,
  order: number,
  trial: Float64Array,
  trialRates: Float64Array,
  counter: { rateEvaluations: number },
): number {
  const size = weightedNorm(y, weight, controlled, 'rms');
  const speed = weightedNorm(rates, weight, controlled, 'rms');
  const nothing = 1e-6 * longest;
  // A step that moves the state by a hundredth of itself.
  let h = Math.min(longest, size < 1e-5 || speed < 1e-5 / longest ? nothing : (0.01 * size) / speed);
  for (let attempt = 0; attempt < 8; attempt++) {
    for (let i = 0; i < trial.length; i++) trial[i] = y[i]! + h * rates[i]!;
    system.rates(t + h, trial, trialRates);
    counter.rateEvaluations++;
    if (allFinite(trialRates)) break;
    h *= 0.1;
  }
  for (let i = 0; i < trial.length; i++) trialRates[i]! -= rates[i]!;
  const bend = weightedNorm(trialRates, weight, controlled, 'rms') / h;
  if (!Number.isFinite(bend)) return h;
  // Equation (4.14), speed and bend taken in units of h so that no unit of time is favoured.
  const steepest = Math.max(speed * h, bend * h * h);
  const second = steepest <= 1e-15 ? Math.max(nothing, 1e-3 * h) : h * (0.01 / steepest) ** (1 / order);
  return Math.min(100 * h, second, longest);
}
