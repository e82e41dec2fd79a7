/**
 * The lowest value that a waveform takes: a pressure must stay above zero.
 */
import type { Waveform } from './schema.ts';

/** In the unit of the waveform. */
export function lowestValue(wave: Waveform): number {
  switch (wave.wave) {
    case 'constant':
      return wave.value;
    case 'sine':
    case 'square':
      return wave.mean - Math.abs(wave.amplitude);
    case 'ramp':
      return Math.min(wave.from, wave.to);
    case 'pulses':
      return Math.min(wave.base, wave.base + wave.height);
    case 'table':
      return wave.values.reduce((least, value) => Math.min(least, value), Infinity);
  }
}
