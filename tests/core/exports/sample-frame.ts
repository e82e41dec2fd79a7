/** A frame whose numbers tell the column they belong in: bubble k has radius k, volume 10 + k, and so on. */
import type { Frame } from '../../../core/run/record.ts';

export function sampleFrame(time: number, bubbleIds: readonly string[], pairs = 2): Frame {
  const column = (base: number): Float64Array => Float64Array.from(bubbleIds, (_, index) => base + index + 1);
  return {
    time,
    bubbleIds,
    radius: column(0),
    volume: column(10),
    pressure: column(20),
    amount: column(30),
    tension: column(40),
    elasticity: column(50),
    coverage: new Float64Array(bubbleIds.length).fill(Number.NaN),
    index: column(70),
    state: Uint8Array.from(bubbleIds, (_, index) => index % 4),
    pairs: {
      count: pairs,
      link: ['t1', 'via:M'],
      from: ['A', 'A'],
      to: ['M', 'B'],
      flow: Float64Array.of(0.25, 0.5),
      margin: Float64Array.of(Number.NaN, 0.75),
      rate: Float64Array.of(Number.NaN, -3),
    },
    series: {
      time,
      bubbles: bubbleIds.length,
      R10: 1.5,
      R21: 1.6,
      R32: 1.7,
      growingModes: 1,
      fastestRate: 0.125,
      minimumMargin: 0.75,
      gasBalance: 1e-15,
    },
  };
}
