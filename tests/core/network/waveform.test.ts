/** Waveforms of pressures and feeds: what they are worth, how they change, and where an integrator must land. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  longestStep,
  nextBreak,
  waveformSlope,
  waveformSwing,
  waveformValue,
  type Waveform,
} from '../../../core/network/waveform.ts';
import { anyWave, breaksOf, pulses, ramp, sine, spanOf, square, table } from './random-waveforms.ts';

const EPSILON = 2 ** -52;

/** Mean of a wave that is level between its breaks, over whole periods from t. */
function meanOver(wave: Waveform, from: number, to: number): number {
  let t = from;
  let sum = 0;
  while (t < to) {
    const next = Math.min(nextBreak(wave, t), to);
    sum += waveformValue(wave, 0.5 * (t + next)) * (next - t);
    t = next;
  }
  return sum / (to - from);
}

const largest = (wave: Waveform): number => {
  const { from, to } = spanOf(wave);
  let most = 0;
  for (let i = 0; i <= 200; i++) most = Math.max(most, Math.abs(waveformValue(wave, from + ((to - from) * i) / 200)));
  return most;
};

describe('the value of a waveform', () => {
  it('is the number itself where the file gives a quantity', () => {
    const level: Waveform = { wave: 'constant', value: 101325 };
    expect([-1e9, 0, 1e9].map((t) => waveformValue(level, t))).toEqual([101325, 101325, 101325]);
  });

  it('of a sine is the mean at the start, the peak a quarter period later, and a phase brings it earlier', () => {
    const breath: Waveform = { wave: 'sine', mean: 100, amplitude: 5, period: 4, phase: 0 };
    expect(waveformValue(breath, 0)).toBe(100);
    expect(waveformValue(breath, 1)).toBe(105);
    expect(waveformValue(breath, 3)).toBe(95);
    expect(waveformValue({ ...breath, phase: Math.PI / 2 }, 0)).toBe(105);
    // sin 30 degrees; a rounding of the argument and one of the sum
    expect(Math.abs(waveformValue(breath, 1 / 3) - 102.5)).toBeLessThan(100 * 2 * EPSILON);
  });

  it('of a square wave is high for its duty and low for the rest', () => {
    const valve: Waveform = { wave: 'square', mean: 100, amplitude: 5, period: 4, phase: 0, duty: 0.25 };
    expect([0, 0.5, 0.999, 1, 2, 3.999, 4].map((t) => waveformValue(valve, t))).toEqual([
      105, 105, 105, 95, 95, 95, 105,
    ]);
    expect([-0.001, -3, -3.001].map((t) => waveformValue(valve, t))).toEqual([95, 95, 105]);
  });

  it('of a square wave has the mean that its duty says, over any whole number of periods', () => {
    fc.assert(
      fc.property(square, fc.double({ min: -5, max: 5, noNaN: true }), fc.integer({ min: 1, max: 4 }), (wave, x, n) => {
        const from = x * wave.period;
        const mean = meanOver(wave, from, from + n * wave.period);
        // Edges are left out where they lie within 1e-9 of a period after an instant (nextBreak): two of them at most here.
        const allowed = 2 * wave.amplitude * 1e-8 + 20 * EPSILON * largest(wave);
        expect(Math.abs(mean - wave.mean - wave.amplitude * (2 * wave.duty - 1))).toBeLessThan(allowed);
      }),
      { seed: 1, numRuns: 300 },
    );
  });

  it('of a square wave moves with its phase as that of a sine does', () => {
    fc.assert(
      fc.property(square, fc.double({ min: -5, max: 5, noNaN: true }), (wave, x) => {
        const half = { ...wave, duty: 0.5 };
        const t = x * wave.period;
        const like = waveformValue({ ...half, wave: 'sine' }, t) - wave.mean;
        // Within a ten-millionth of the amplitude of zero it is at an edge, where the two are rounded apart.
        fc.pre(Math.abs(like) > 1e-7 * wave.amplitude);
        expect(waveformValue(half, t)).toBe(like > 0 ? wave.mean + wave.amplitude : wave.mean - wave.amplitude);
      }),
      { seed: 2, numRuns: 300 },
    );
  });

  it('of a ramp is held before it, straight in it, and held after it', () => {
    const rise: Waveform = { wave: 'ramp', from: 100, to: 300, start: 2, over: 4 };
    expect([-10, 2, 3, 4, 6, 1e9].map((t) => waveformValue(rise, t))).toEqual([100, 100, 150, 200, 300, 300]);
  });

  it('of pulses is the height over the base for their width, from the start of each period', () => {
    const beat: Waveform = { wave: 'pulses', base: 1, height: 10, width: 0.5, period: 2 };
    expect([0, 0.25, 0.5, 1.9, 2, 2.4, 2.5].map((t) => waveformValue(beat, t))).toEqual([11, 11, 1, 1, 11, 11, 1]);
    fc.assert(
      fc.property(pulses, (wave) => {
        const { base, height, width, period } = wave;
        expect(Math.abs(meanOver(wave, 0, 3 * period) - base - (height * width) / period)).toBeLessThan(
          20 * EPSILON * (Math.abs(base) + height),
        );
      }),
      { seed: 3, numRuns: 200 },
    );
  });

  it('of a table is its rows at their times, straight between them and held outside', () => {
    const trace: Waveform = { wave: 'table', times: [1, 2, 4], values: [10, 30, -10] };
    expect([-5, 1, 1.5, 2, 3, 4, 99].map((t) => waveformValue(trace, t))).toEqual([10, 10, 20, 30, 10, -10, -10]);
    expect([0, 3, 5].map((t) => waveformValue({ wave: 'table', times: [3], values: [7] }, t))).toEqual([7, 7, 7]);
    fc.assert(
      fc.property(table, (wave) => {
        wave.times.forEach((time, i) => expect(waveformValue(wave, time)).toBe(wave.values[i]));
      }),
      { seed: 4, numRuns: 200 },
    );
  });
});

describe('an edge', () => {
  it('has the value after it, and for a step that ends there the value before it', () => {
    let edges = 0;
    fc.assert(
      fc.property(fc.oneof(square, pulses), (wave) => {
        for (const t of breaksOf(wave)) {
          const hair = 1e-6 * wave.period;
          expect(waveformValue(wave, t, 1)).toBe(waveformValue(wave, t + hair));
          expect(waveformValue(wave, t, -1)).toBe(waveformValue(wave, t - hair));
          expect(waveformValue(wave, t, 1)).not.toBe(waveformValue(wave, t, -1));
          edges++;
        }
      }),
      { seed: 5, numRuns: 200 },
    );
    expect(edges).toBeGreaterThan(2000);
  });

  it('keeps its two sides after a million periods, though the instant is rounded by then', () => {
    fc.assert(
      fc.property(square, fc.integer({ min: 500_000, max: 1_000_000 }), (wave, periods) => {
        let t = periods * wave.period;
        for (let n = 0; n < 4; n++) {
          t = nextBreak(wave, t);
          expect(waveformValue(wave, t, 1)).toBe(waveformValue(wave, t + 1e-6 * wave.period));
          expect(waveformValue(wave, t, -1)).toBe(waveformValue(wave, t - 1e-6 * wave.period));
          expect(waveformValue(wave, t, 1)).not.toBe(waveformValue(wave, t, -1));
        }
      }),
      { seed: 6, numRuns: 200 },
    );
  });

  it('of a ramp that takes no time is a step', () => {
    const step: Waveform = { wave: 'ramp', from: 1, to: 2, start: 3, over: 0 };
    expect(waveformValue(step, 2.999)).toBe(1);
    expect(waveformValue(step, 3, -1)).toBe(1);
    expect(waveformValue(step, 3, 1)).toBe(2);
    expect(waveformValue(step, 3.001)).toBe(2);
    expect([2, 3, 4].map((t) => waveformSlope(step, t))).toEqual([0, 0, 0]);
    expect([2, 3].map((t) => nextBreak(step, t))).toEqual([3, Infinity]);
  });

  it('is nowhere else: a wave that does not jump has one value from both sides', () => {
    fc.assert(
      fc.property(
        fc.oneof(
          sine,
          table,
          ramp.filter(({ over }) => over > 0),
        ),
        (wave) => {
          for (const t of [...breaksOf(wave), 0, 1]) expect(waveformValue(wave, t, -1)).toBe(waveformValue(wave, t, 1));
        },
      ),
      { seed: 7, numRuns: 200 },
    );
  });
});

describe('the slope of a waveform', () => {
  it('is that of its own central differences wherever no break is near', () => {
    let seen = 0;
    fc.assert(
      fc.property(anyWave, fc.double({ min: 0, max: 1, noNaN: true }), (wave, x) => {
        const { from, to } = spanOf(wave);
        const t = from + x * (to - from);
        const h = 1e-6 * (to - from);
        fc.pre(breaksOf(wave).every((at) => Math.abs(at - t) > 2 * h));
        const difference = (waveformValue(wave, t + h) - waveformValue(wave, t - h)) / (2 * h);
        // Truncation h^2/6 f''' of a sine, whose span is 13 periods, and nothing of straight pieces. Rounding: of the value, and of
        // the instant, whose own rounding shifts the value by slope times t EPSILON.
        const steepest = wave.wave === 'sine' ? (2 * Math.PI * wave.amplitude) / wave.period : 0;
        const truncation = wave.wave === 'sine' ? (steepest * ((2 * Math.PI * h) / wave.period) ** 2) / 6 : 0;
        const slope = waveformSlope(wave, t);
        const instant = Math.max(Math.abs(slope), steepest) * Math.max(Math.abs(t), 1e-3 * (to - from)) * EPSILON;
        const rounding = (4 * EPSILON * largest(wave) + 8 * instant) / h;
        expect(Math.abs(slope - difference)).toBeLessThanOrEqual(truncation + rounding);
        if (slope !== 0) seen++;
      }),
      { seed: 8, numRuns: 1000 },
    );
    expect(seen).toBeGreaterThan(200);
  });

  it('at a bend is that after it, and for a step that ends there that before it', () => {
    const trace: Waveform = { wave: 'table', times: [1, 2, 4], values: [10, 30, -10] };
    expect([1, 2, 4].map((t) => waveformSlope(trace, t))).toEqual([20, -20, 0]);
    expect([1, 2, 4].map((t) => waveformSlope(trace, t, -1))).toEqual([0, 20, -20]);
    const rise: Waveform = { wave: 'ramp', from: 100, to: 300, start: 2, over: 4 };
    expect([2, 6].map((t) => waveformSlope(rise, t))).toEqual([50, 0]);
    expect([2, 6].map((t) => waveformSlope(rise, t, -1))).toEqual([0, 50]);
  });
});

describe('the next break', () => {
  it('of every wave is the first instant after the present at which its definition jumps or bends', () => {
    fc.assert(
      fc.property(anyWave, fc.double({ min: 0, max: 0.9, noNaN: true }), (wave, x) => {
        const { from, to } = spanOf(wave);
        const t = from + x * (to - from);
        const after = breaksOf(wave).filter((at) => at > t);
        // Nearer than the 1e-9 of a period that the wave itself cannot tell apart, either answer is good.
        fc.pre(after.length === 0 || after[0]! - t > 1e-8 * (to - from));
        const next = nextBreak(wave, t);
        if (after.length === 0) expect(next).toBe(Infinity);
        else expect(Math.abs(next - after[0]!)).toBeLessThanOrEqual(8 * EPSILON * (Math.abs(from) + Math.abs(to)));
      }),
      { seed: 9, numRuns: 1000 },
    );
  });

  it('lies ahead, and no instant is met twice: a run from break to break goes on', () => {
    fc.assert(
      fc.property(fc.oneof(square, pulses), fc.nat(1_000_000), (wave, periods) => {
        const start = periods * wave.period;
        let t = start;
        for (let n = 0; n < 40; n++) {
          const next = nextBreak(wave, t);
          // No part of a period is shorter than a hundredth of it.
          expect(n === 0 ? next > t : next - t > 0.009 * wave.period).toBe(true);
          t = next;
        }
        // Forty edges are twenty periods; half an edge either way for where it began.
        expect(Math.abs((t - start) / wave.period - 20)).toBeLessThan(1.01);
      }),
      { seed: 10, numRuns: 200 },
    );
  });

  it('of a sine and of a constant never comes', () => {
    expect(nextBreak({ wave: 'constant', value: 1 }, 0)).toBe(Infinity);
    expect(nextBreak({ wave: 'sine', mean: 0, amplitude: 1, period: 1, phase: 0 }, 0)).toBe(Infinity);
  });
});

describe('the longest step', () => {
  it('is an eighth of a period of a sine, which no break announces, and without bound where breaks do', () => {
    fc.assert(
      fc.property(anyWave, (wave) => {
        expect(longestStep(wave)).toBe(wave.wave === 'sine' ? wave.period / 8 : Infinity);
      }),
      { seed: 11, numRuns: 100 },
    );
  });
});

describe('the swing of a waveform', () => {
  it('is the way from its lowest to its highest value', () => {
    fc.assert(
      fc.property(anyWave, (wave) => {
        const { from, to } = spanOf(wave);
        const seen = Array.from({ length: 20_001 }, (_, i) => waveformValue(wave, from + ((to - from) * i) / 20_000));
        for (const at of breaksOf(wave)) seen.push(waveformValue(wave, at), waveformValue(wave, at, -1));
        const swing = seen.reduce((m, one) => Math.max(m, one)) - seen.reduce((m, one) => Math.min(m, one));
        // Of 13 periods a sine is seen at 1540 places each: its peak is missed by (pi/1540)^2/2 of the amplitude at most.
        const missed = wave.wave === 'sine' ? 2 * wave.amplitude * 2.1e-6 : 0;
        expect(Math.abs(waveformSwing(wave) - swing)).toBeLessThanOrEqual(missed + 4 * EPSILON * largest(wave));
      }),
      { seed: 12, numRuns: 150 },
    );
  });

  it('of a wave turned upside down is the same', () => {
    expect(waveformSwing({ wave: 'sine', mean: 0, amplitude: -2, period: 1, phase: 0 })).toBe(4);
    expect(waveformSwing({ wave: 'pulses', base: 5, height: -2, width: 1, period: 2 })).toBe(2);
    expect(waveformSwing({ wave: 'ramp', from: 5, to: 2, start: 0, over: 1 })).toBe(3);
  });

  it('of a pressure recorded at 100 Hz for an hour is found as that of a short table', () => {
    const rows = 360_000;
    const recorded: Waveform = {
      wave: 'table',
      times: Array.from({ length: rows }, (_, i) => i / 100),
      values: Array.from({ length: rows }, (_, i) => 101325 + (i % 7)),
    };
    expect(waveformSwing(recorded)).toBe(6);
  });
});
