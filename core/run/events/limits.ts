/** A law is used outside its validity. Each limit of each thing is told once, when it is first passed. */
import { excess, networkLimits } from '../limits.ts';
import { happening, type WatchMaker } from '../watch.ts';

export const watchLimits: WatchMaker = ({ system, alive, linkOpen }) => {
  const limits = networkLimits(system, alive, linkOpen);
  if (limits.length === 0) return null;
  const value = (k: number, t: number): number => (limits[k]!.present() ? excess(limits[k]!, t) : NaN);
  return {
    count: limits.length,
    once: true,
    needsSlopes: false,
    evaluate(t, out) {
      for (let k = 0; k < limits.length; k++) out[k] = value(k, t);
    },
    value,
    touches: (k) => limits[k]!.nodes,
    tell(k, t, positive) {
      if (!positive) return null;
      const { subject, partner, link, unit, detail } = limits[k]!;
      return happening('limit-exceeded', subject, { partner, link, value: limits[k]!.value(t), unit, detail });
    },
    key: (k) => `limit ${limits[k]!.subject} ${limits[k]!.link} ${limits[k]!.detail}`,
  };
};
