/** A mounted bubble shrinks past the hemisphere of its mouth, below which it is stiff, or grows out of it again. */
import { happening, type WatchMaker } from '../watch.ts';

export const watchMouths: WatchMaker = ({ system, alive }) => {
  const { nodes } = system.network;
  const mounted: number[] = [];
  for (let i = 0; i < nodes.bubbleCount; i++) if (nodes.mouth[i]! > 0) mounted.push(i);
  if (mounted.length === 0) return null;
  const name = (k: number): string => system.network.nodeName(nodes.origin[mounted[k]!]!);
  const value = (k: number): number => {
    const i = mounted[k]!;
    return alive[i] === 0 ? NaN : system.state.size[i]! / nodes.mouth[i]! - 1;
  };
  return {
    count: mounted.length,
    needsSlopes: false,
    evaluate(_t, out) {
      for (let k = 0; k < mounted.length; k++) out[k] = value(k);
    },
    value,
    touches: (k) => [mounted[k]!],
    tell(k, _t, positive, first) {
      if (first) return null;
      const radius = system.state.radius[mounted[k]!]!;
      return positive
        ? happening('mouth-regained', name(k), {
            value: radius,
            unit: 'm',
            detail: 'grows past the hemisphere of its mouth',
          })
        : happening('mouth-passed', name(k), {
            value: radius,
            unit: 'm',
            detail: 'sinks below the hemisphere of its mouth',
          });
    },
    key: (k) => nodes.origin[mounted[k]!]!,
  };
};
