/** Random waveforms of every kind, as a checked scenario holds them, for the property tests of values, slopes and edges. */
import fc from 'fast-check';
import type { Waveform } from '../../../core/network/waveform.ts';

const real = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });
const level = real(-2e5, 2e5);
/** From a flutter to an hour. */
const duration = real(-3, 3.5).map((exponent) => 10 ** exponent);
const phase = real(-10, 10);
/** Neither part of a period shorter than a hundredth of it. */
const part = real(0.01, 0.99);

type Of<Wave extends Waveform['wave']> = Extract<Waveform, { readonly wave: Wave }>;

export const sine: fc.Arbitrary<Of<'sine'>> = fc.record({
  wave: fc.constant('sine' as const),
  mean: level,
  amplitude: real(1, 1e5),
  period: duration,
  phase,
});

export const square: fc.Arbitrary<Of<'square'>> = fc.record({
  wave: fc.constant('square' as const),
  mean: level,
  amplitude: real(1, 1e5),
  period: duration,
  phase,
  duty: part,
});

export const pulses: fc.Arbitrary<Of<'pulses'>> = fc
  .record({ base: level, height: real(1, 1e5), period: duration, share: part })
  .map(({ base, height, period, share }) => ({ wave: 'pulses', base, height, period, width: share * period }));

export const ramp: fc.Arbitrary<Of<'ramp'>> = fc.record({
  wave: fc.constant('ramp' as const),
  from: level,
  to: level,
  start: real(-10, 10),
  over: fc.oneof({ weight: 1, arbitrary: fc.constant(0) }, { weight: 3, arbitrary: real(0.1, 100) }),
});

export const table: fc.Arbitrary<Of<'table'>> = fc
  .array(fc.tuple(real(0.01, 5), level), { minLength: 1, maxLength: 12 })
  .chain((rows) =>
    real(-10, 10).map((start) => {
      let time = start;
      return { wave: 'table', times: rows.map(([gap]) => (time += gap)), values: rows.map(([, value]) => value) };
    }),
  );

export const anyWave: fc.Arbitrary<Waveform> = fc.oneof(
  fc.record({ wave: fc.constant('constant' as const), value: level }),
  sine,
  square,
  pulses,
  ramp,
  table,
);

/** The time over which a wave shows its shape, s. */
export function spanOf(wave: Waveform): { readonly from: number; readonly to: number } {
  switch (wave.wave) {
    case 'constant':
      return { from: -1, to: 1 };
    case 'sine':
    case 'square':
    case 'pulses':
      return { from: -3 * wave.period, to: 10 * wave.period };
    case 'ramp':
      return { from: wave.start - 1, to: wave.start + wave.over + 1 };
    case 'table':
      return { from: wave.times[0]! - 1, to: wave.times.at(-1)! + 1 };
  }
}

/** Every instant in and around the wave's span at which it jumps or bends, reckoned from its definition and in rising order. */
export function breaksOf(wave: Waveform): number[] {
  const periodic = (period: number, lead: number, length: number): number[] => {
    const breaks: number[] = [];
    for (let k = -20; k < 20; k++) breaks.push(k * period - lead, k * period - lead + length);
    return breaks;
  };
  switch (wave.wave) {
    case 'constant':
    case 'sine':
      return [];
    case 'square':
      return periodic(wave.period, (wave.phase / (2 * Math.PI)) * wave.period, wave.duty * wave.period);
    case 'pulses':
      return periodic(wave.period, 0, wave.width);
    case 'ramp':
      return wave.over > 0 ? [wave.start, wave.start + wave.over] : [wave.start];
    case 'table':
      return [...wave.times];
  }
}
