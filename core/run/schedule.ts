/** When the run must land: edges of waveforms, valves; and how long a step may be lest it jump over a wave. */
import type { LinkTable, Network } from '../network/network.ts';
import { longestStep, nextBreak, type Waveform } from '../network/waveform.ts';

/** Everything of a network that follows a waveform that is not constant. */
export function movingWaves(network: Network): Waveform[] {
  const waves = [
    network.ambient,
    ...network.nodes.drive.filter((wave) => wave !== null),
    ...network.feeds.map((feed) => feed.rate),
  ];
  return waves.filter((wave) => wave.wave !== 'constant');
}

/** The first instant after t at which a waveform breaks; Infinity where none does. */
export function nextWaveBreak(waves: readonly Waveform[], t: number): number {
  let next = Infinity;
  for (const wave of waves) next = Math.min(next, nextBreak(wave, t));
  return next;
}

export function longestWaveStep(waves: readonly Waveform[]): number {
  let longest = Infinity;
  for (const wave of waves) longest = Math.min(longest, longestStep(wave));
  return longest;
}

/** The first instant after t at which a valve moves. */
export function nextValveMove(network: Network, t: number): number {
  let next = Infinity;
  for (const table of network.links) {
    for (const intervals of table.open) {
      if (intervals === null) continue;
      for (const bounds of intervals) for (const instant of bounds) if (instant > t && instant < next) next = instant;
    }
  }
  return next;
}

/** Whether a valve stands open just after time t. */
export function isValveOpen(table: LinkTable, link: number, t: number): boolean {
  const intervals = table.open[link];
  return intervals === null || intervals === undefined || intervals.some(([from, to]) => from <= t && t < to);
}

export function hasValves(network: Network): boolean {
  return network.links.some((table) => table.open.some((intervals) => intervals !== null));
}
