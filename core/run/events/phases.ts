/** A film splits into two surface phases, or holds micelles: on both stretches its elasticity is nought. */
import type { NodeState } from '../../network/node-state.ts';
import type { EventName } from '../record.ts';
import { happening, type WatchMaker } from '../watch.ts';

/** A watch on one indicator of every bubble whose film can change. */
function watchIndicator(
  indicator: (state: NodeState) => Float64Array,
  begins: EventName,
  ends: EventName,
  beginning: string,
  ending: string,
): WatchMaker {
  return ({ system, alive }) => {
    const { nodes, films } = system.network;
    const watched: number[] = [];
    for (let i = 0; i < nodes.bubbleCount; i++) if (!films[nodes.film[i]!]!.constantTension) watched.push(i);
    if (watched.length === 0) return null;
    const name = (k: number): string => system.network.nodeName(nodes.origin[watched[k]!]!);
    const values = indicator(system.state);
    const value = (k: number): number => (alive[watched[k]!] === 0 ? NaN : values[watched[k]!]!);
    return {
      count: watched.length,
      needsSlopes: false,
      evaluate(_t, out) {
        for (let k = 0; k < watched.length; k++) out[k] = value(k);
      },
      value,
      touches: (k) => [watched[k]!],
      tell(k, _t, positive, first) {
        if (first && !positive) return null;
        const tension = system.state.tension[watched[k]!]!;
        return happening(positive ? begins : ends, name(k), {
          value: tension,
          unit: 'N/m',
          detail: positive ? beginning : ending,
        });
      },
      key: (k) => nodes.origin[watched[k]!]!,
    };
  };
}

export const watchSplits = watchIndicator(
  (state) => state.twoPhase,
  'split-begins',
  'split-ends',
  'two surface phases: tension constant, no elasticity',
  'one surface phase again',
);

export const watchMicelles = watchIndicator(
  (state) => state.micelles,
  'micelles-begin',
  'micelles-end',
  'the film liquid passes the cmc: tension pinned, no elasticity on slow changes',
  'the film liquid falls below the cmc',
);
