/**
 * Waveforms of time: pressures and feeds. Value, slope, and the instants where they jump or bend,
 * at which an integrator must land and begin anew.
 */

import type { Waveform } from '../scenario/schema.ts';

export type { Waveform };

const TURN = 2 * Math.PI;

/** Position inside a period, 0 <= result < period, for a wave shifted by `phase` radians. */
function within(t: number, period: number, phase: number): number {
  const x = (t / period + phase / TURN) % 1;
  return (x < 0 ? x + 1 : x) * period;
}

/**
 * Index of the table segment that `t` is in: the last i with times[i] <= t (-1 before the first).
 */
function segment(times: readonly number[], t: number): number {
  let low = 0;
  let high = times.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (times[middle]! <= t) low = middle + 1;
    else high = middle;
  }
  return low - 1;
}

/**
 * Value of a waveform at time t (s), in its own unit. At an edge it has the value just after the edge;
 * `side` -1 asks for the value just before it (a step that ends on an edge belongs to what came before).
 */
export function waveformValue(wave: Waveform, t: number, side: 1 | -1 = 1): number {
  switch (wave.wave) {
    case 'constant':
      return wave.value;
    case 'sine':
      return wave.mean + wave.amplitude * Math.sin((TURN * t) / wave.period + wave.phase);
    case 'square': {
      const x = nudge(within(t, wave.period, wave.phase), wave.period, wave.duty * wave.period, side);
      return x < wave.duty * wave.period ? wave.mean + wave.amplitude : wave.mean - wave.amplitude;
    }
    case 'ramp': {
      const x = Math.min(1, Math.max(0, (t - wave.start) / wave.over));
      return wave.over > 0
        ? wave.from + (wave.to - wave.from) * x
        : t < wave.start || (t === wave.start && side < 0)
          ? wave.from
          : wave.to;
    }
    case 'pulses': {
      const x = nudge(within(t, wave.period, 0), wave.period, wave.width, side);
      return x < wave.width ? wave.base + wave.height : wave.base;
    }
    case 'table': {
      const i = segment(wave.times, t);
      const last = wave.times.length - 1;
      if (i < 0) return wave.values[0]!;
      if (i >= last) return wave.values[last]!;
      const [t0, t1] = [wave.times[i]!, wave.times[i + 1]!];
      return wave.values[i]! + ((wave.values[i + 1]! - wave.values[i]!) * (t - t0)) / (t1 - t0);
    }
  }
}

/**
 * Edges fall on instants that rounding may put a hair to either side: within 1e-9 of a period of an edge, the side asked for wins.
 */
function nudge(x: number, period: number, edge: number, side: 1 | -1): number {
  const near = 1e-9 * period;
  if (x < near || period - x < near) return side > 0 ? 0 : period;
  if (Math.abs(x - edge) < near) return side > 0 ? edge : Math.max(0, edge - near);
  return x;
}

/** Slope of a waveform at time t, per second; at a bend, the slope just after it (`side` -1: just before). Edges have none. */
export function waveformSlope(wave: Waveform, t: number, side: 1 | -1 = 1): number {
  switch (wave.wave) {
    case 'constant':
    case 'square':
    case 'pulses':
      return 0;
    case 'sine':
      return ((wave.amplitude * TURN) / wave.period) * Math.cos((TURN * t) / wave.period + wave.phase);
    case 'ramp': {
      const inside =
        side > 0 ? t >= wave.start && t < wave.start + wave.over : t > wave.start && t <= wave.start + wave.over;
      return inside && wave.over > 0 ? (wave.to - wave.from) / wave.over : 0;
    }
    case 'table': {
      let i = segment(wave.times, t);
      if (side < 0 && i >= 0 && wave.times[i] === t) i -= 1;
      if (i < 0 || i >= wave.times.length - 1) return 0;
      return (wave.values[i + 1]! - wave.values[i]!) / (wave.times[i + 1]! - wave.times[i]!);
    }
  }
}

/** The first instant after t at which the waveform jumps or bends; Infinity where there is none. */
export function nextBreak(wave: Waveform, t: number): number {
  switch (wave.wave) {
    case 'constant':
    case 'sine':
      return Infinity;
    case 'square':
      return nextPeriodic(t, wave.period, wave.phase, wave.duty * wave.period);
    case 'pulses':
      return nextPeriodic(t, wave.period, 0, wave.width);
    case 'ramp':
      return t < wave.start ? wave.start : t < wave.start + wave.over ? wave.start + wave.over : Infinity;
    case 'table':
      return wave.times[segment(wave.times, t) + 1] ?? Infinity;
  }
}

function nextPeriodic(t: number, period: number, phase: number, edge: number): number {
  const shift = (phase / TURN) * period;
  const first = Math.floor((t + shift) / period) - 1;
  const margin = 1e-9 * period;
  for (let k = first; k < first + 5; k++) {
    const rise = k * period - shift;
    if (rise > t + margin) return rise;
    if (rise + edge > t + margin) return rise + edge;
  }
  return Infinity;
}

/** The longest step that cannot jump over the wave's shape: an eighth of a sine's period; others break at their edges: Infinity. */
export function longestStep(wave: Waveform): number {
  return wave.wave === 'sine' ? wave.period / 8 : Infinity;
}

/** The greatest swing of the wave from its lowest to its highest value, used to size a pressure signal. */
export function waveformSwing(wave: Waveform): number {
  switch (wave.wave) {
    case 'constant':
      return 0;
    case 'sine':
    case 'square':
      return 2 * Math.abs(wave.amplitude);
    case 'ramp':
      return Math.abs(wave.to - wave.from);
    case 'pulses':
      return Math.abs(wave.height);
    case 'table':
      return wave.values.reduce((a, b) => Math.max(a, b)) - wave.values.reduce((a, b) => Math.min(a, b));
  }
}
