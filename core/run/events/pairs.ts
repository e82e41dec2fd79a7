/** A pair turns unstable or stable: its margin passes 1. */
import type { Pairs } from '../pairs.ts';
import { happening, type Happening, type WatchMaker } from '../watch.ts';
import type { NodeState } from '../../network/node-state.ts';

export const watchPairs: WatchMaker = ({ system, pairs, alive }) => {
  if (pairs.count === 0) return null;
  const { state } = system;
  // Pairs of pure-liquid spheres can never hold: they are told once, and need no watching.
  const steady: number[] = [];
  const moving: number[] = [];
  for (let k = 0; k < pairs.count; k++) (pairs.alwaysUnstable(k) ? steady : moving).push(k);
  const from = Int32Array.from(moving, (k) => pairs.from(k));
  const to = Int32Array.from(moving, (k) => pairs.to(k));
  const oneGas = state.species === 1;
  const value = (m: number, t: number): number => {
    if (!pairs.isOpen(moving[m]!, alive)) return NaN;
    // With one gas the margin's sign is that of u_i + u_j: no need of the rest.
    return oneGas ? state.stiffness[from[m]!]! + state.stiffness[to[m]!]! : pairs.margin(moving[m]!, state, t) - 1;
  };
  return {
    count: moving.length,
    needsSlopes: moving.length > 0,
    evaluate(t, out) {
      for (let m = 0; m < moving.length; m++) out[m] = value(m, t);
    },
    value,
    touches: (m) => [from[m]!, to[m]!],
    tell(m, t, positive, first) {
      if (first && positive) return null;
      return describe(pairs, state, moving[m]!, t, positive);
    },
    standing(t, told) {
      const standing: Happening[] = [];
      for (const k of steady) {
        if (!pairs.isOpen(k, alive)) continue;
        const key = pairs.key(k);
        if (told.has(key)) continue;
        told.add(key);
        standing.push(describe(pairs, state, k, t, false));
      }
      return standing;
    },
    key: (m) => pairs.key(moving[m]!),
  };
};

function describe(pairs: Pairs, state: NodeState, k: number, t: number, stable: boolean): Happening {
  const [subject, partner] = pairs.ends(k);
  const downhill = state.pressure[pairs.from(k)]! >= state.pressure[pairs.to(k)]!;
  return happening(stable ? 'pair-stable' : 'pair-unstable', subject, {
    partner,
    link: pairs.linkName(k),
    value: pairs.margin(k, state, t),
    unit: '1',
    detail: stable ? 'pushes back' : downhill ? `${subject} feeds ${partner}` : `${partner} feeds ${subject}`,
  });
}
