/** A law is used outside its validity. Each limit of each thing is told once, when it is first passed. */
import { excess, MOST_BOUNDS, networkLimits } from '../limits.ts';
import { happening, type WatchMaker } from '../watch.ts';

export const watchLimits: WatchMaker = ({ system, alive, linkOpen }) => {
  const things = networkLimits(system);
  if (things.length === 0) return null;
  const { nodes, nodeName, linkName } = system.network;
  // Of each quantity: the thing it belongs to, and its place among the thing's bounds.
  const thingOf: number[] = [];
  const placeOf: number[] = [];
  things.forEach(({ bounds }, thing) => {
    for (let place = 0; place < bounds.length; place++) {
      thingOf.push(thing);
      placeOf.push(place);
    }
  });
  const values = new Float64Array(MOST_BOUNDS);

  function present(thing: number): boolean {
    const { nodes: touched, link } = things[thing]!;
    for (const i of touched) if (alive[i] === 0) return false;
    return link === null || linkOpen[link.group]![link.index] !== 0;
  }

  const measured = (k: number, t: number): number => {
    things[thingOf[k]!]!.measure(t, values);
    return values[placeOf[k]!]!;
  };
  const boundOf = (k: number) => things[thingOf[k]!]!.bounds[placeOf[k]!]!;

  return {
    count: thingOf.length,
    once: true,
    needsSlopes: false,
    evaluate(t, out) {
      let at = 0;
      for (let thing = 0; thing < things.length; thing++) {
        const limits = things[thing]!;
        const { bounds } = limits;
        if (present(thing)) {
          limits.measure(t, values);
          for (let place = 0; place < bounds.length; place++) out[at++] = excess(bounds[place]!, values[place]!);
        } else {
          out.fill(NaN, at, at + bounds.length);
          at += bounds.length;
        }
      }
    },
    value: (k, t) => (present(thingOf[k]!) ? excess(boundOf(k), measured(k, t)) : NaN),
    touches: (k) => things[thingOf[k]!]!.nodes,
    tell(k, t, positive) {
      if (!positive) return null;
      const { nodes: touched, link } = things[thingOf[k]!]!;
      const { unit, detail } = boundOf(k);
      const [subject = '', partner = ''] = touched.map((i) => nodeName(nodes.origin[i]!));
      const name = link === null ? '' : linkName(system.groups[link.group]!.group.table.origin[link.index]!);
      return happening('limit-exceeded', subject, { partner, link: name, value: measured(k, t), unit, detail });
    },
    // Bubbles and links are numbered each for themselves.
    key(k) {
      const { nodes: touched, link } = things[thingOf[k]!]!;
      const origin =
        link === null
          ? 2 * nodes.origin[touched[0]!]!
          : 2 * system.groups[link.group]!.group.table.origin[link.index]! + 1;
      return origin * MOST_BOUNDS + placeOf[k]!;
    },
  };
};
