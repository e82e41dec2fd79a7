/** When the run must land: edges of waveforms, valves; and how long a step may be lest it jump over a wave. */
import type { LinkTable, Network } from '../network/network.ts';
import { longestStep, nextBreak, type Waveform } from '../network/waveform.ts';

function waves(network: Network): Waveform[] {
  return [network.ambient, ...network.nodes.drive.filter((wave) => wave !== null), ...network.feeds.map((feed) => feed.rate)];
}

/** The first instant after t at which a waveform breaks; Infinity where none does. */
export function nextWaveBreak(network: Network, t: number): number {
  return Math.min(Infinity, ...waves(network).map((wave) => nextBreak(wave, t)));
}

export function longestWaveStep(network: Network): number {
  return Math.min(Infinity, ...waves(network).map(longestStep));
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
