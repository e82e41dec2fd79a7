/**
 * The watches of a network at work: which signed quantities changed sign inside a step, when exactly, and what that means.
 * Signs are kept by name, so that a network made smaller does not tell again what was told.
 */
import { FILM_SIZE } from '../films/film.ts';
import { BUBBLE } from '../network/network.ts';
import { faceArea } from '../network/geometry.ts';
import { WATCHES } from './events/register.ts';
import { findExcursion } from './locate.ts';
import type { RunEvent } from './record.ts';
import type { Looking, Watch, WatchContext } from './watch.ts';

/** What was seen and told so far, by watch and key: it outlives the watches, which are remade with the network. */
export interface Memory {
  readonly signs: readonly Map<number, boolean>[];
  readonly told: readonly Set<number>[];
}

export function createMemory(): Memory {
  return { signs: WATCHES.map(() => new Map<number, boolean>()), told: WATCHES.map(() => new Set<number>()) };
}

export interface Observation {
  /** True where some watch reads slopes. */
  readonly needsSlopes: boolean;
  /**
   * What holds at time t and was not told: at the start, after valves moved, after the network was remade.
   * Node states are those of t. Updates the memory and remembers the values.
   * @param fresh false where nothing can be standing that was not before
   */
  opening(t: number, memory: Memory, fresh: boolean): RunEvent[];
  /**
   * Passages inside (from, to], unordered.
   * @param inside looks at any instant of the step
   */
  passages(from: number, to: number, inside: Looking, memory: Memory): RunEvent[];
  /** Takes the present node states as the start of the next step. */
  remember(t: number): void;
  /** Surfactant that the faces and film liquids of all living bubbles hold by their present state, mol. */
  surfactantHeld(): number;
}

const filmOut = new Float64Array(FILM_SIZE);

/** Up to this many watched quantities a step is looked at in its middle too, for what comes and goes inside it. */
const LOOK_INSIDE = 400;

export function createObservation(context: WatchContext): Observation {
  const { system, alive } = context;
  const watches: Watch[] = [];
  /** The place of each watch in the register. */
  const kinds: number[] = [];
  WATCHES.forEach((make, kind) => {
    const watch = make(context);
    if (watch === null) return;
    watches.push(watch);
    kinds.push(kind);
  });
  const offsets: number[] = [];
  let total = 0;
  for (const watch of watches) {
    offsets.push(total);
    total += watch.count;
  }
  const before = new Float64Array(total);
  const looksInside = total <= LOOK_INSIDE;
  const middle = new Float64Array(looksInside ? total : 0);
  const after = new Float64Array(total);
  const views = (whole: Float64Array): Float64Array[] =>
    watches.map((watch, w) => whole.subarray(offsets[w], offsets[w]! + watch.count));
  const beforeViews = views(before);
  const middleViews = looksInside ? views(middle) : [];
  const afterViews = views(after);
  const needsSlopes = watches.some((watch) => watch.needsSlopes);

  function evaluateAll(t: number, into: readonly Float64Array[]): void {
    watches.forEach((watch, w) => watch.evaluate(t, into[w]!));
  }

  function tell(w: number, k: number, t: number, positive: boolean, first: boolean, memory: Memory): RunEvent | null {
    const watch = watches[w]!;
    if (watch.once === true) {
      if (!positive) return null;
      const key = watch.key(k);
      const told = memory.told[kinds[w]!]!;
      if (told.has(key)) return null;
      told.add(key);
    }
    const what = watch.tell(k, t, positive, first);
    return what === null ? null : { time: t, ...what };
  }

  return {
    needsSlopes,

    opening(t, memory, fresh) {
      const events: RunEvent[] = [];
      evaluateAll(t, beforeViews);
      watches.forEach((watch, w) => {
        const signs = memory.signs[kinds[w]!]!;
        if (fresh) {
          for (const what of watch.standing?.(t, memory.told[kinds[w]!]!) ?? []) events.push({ time: t, ...what });
        }
        for (let k = 0; k < watch.count; k++) {
          const value = beforeViews[w]![k]!;
          const key = watch.key(k);
          if (Number.isNaN(value)) {
            signs.delete(key);
            continue;
          }
          const known = signs.get(key);
          const positive = value >= 0;
          if (known === positive) continue;
          signs.set(key, positive);
          const event = tell(w, k, t, positive, known === undefined, memory);
          if (event) events.push(event);
        }
      });
      return events;
    },

    passages(from, to, inside, memory) {
      if (total === 0) return [];
      const found: RunEvent[] = [];
      if (!inside.lookAt(to)) return [];
      evaluateAll(to, afterViews);
      const halfway = looksInside && inside.lookAt(0.5 * (from + to));
      if (halfway) evaluateAll(0.5 * (from + to), middleViews);
      const search = (w: number, k: number, a: number, fa: number, b: number, fb: number): void => {
        if (Number.isNaN(fa) || Number.isNaN(fb) || fa >= 0 === fb >= 0) return;
        const watch = watches[w]!;
        const nodes = watch.touches(k);
        const time = inside.passage(a, fa, b, fb, nodes, (t) => watch.value(k, t));
        inside.lookAtNodes(time, nodes);
        memory.signs[kinds[w]!]!.set(watch.key(k), fb >= 0);
        const event = tell(w, k, time, fb >= 0, false, memory);
        if (event) found.push(event);
      };
      for (let w = 0; w < watches.length; w++) {
        for (let k = 0; k < watches[w]!.count; k++) {
          const fa = beforeViews[w]![k]!;
          const fb = afterViews[w]![k]!;
          if (halfway) {
            const fm = middleViews[w]![k]!;
            const middle = 0.5 * (from + to);
            const at = (t: number): number =>
              inside.lookAtNodes(t, watches[w]!.touches(k)) ? watches[w]!.value(k, t) : NaN;
            const beyond = findExcursion(at, from, fa, middle, fm, to, fb);
            if (beyond === null) {
              search(w, k, from, fa, middle, fm);
              search(w, k, middle, fm, to, fb);
            } else {
              search(w, k, from, fa, beyond.time, beyond.value);
              search(w, k, beyond.time, beyond.value, to, fb);
            }
          } else {
            search(w, k, from, fa, to, fb);
          }
        }
      }
      return found;
    },

    remember(t) {
      if (total > 0) evaluateAll(t, beforeViews);
    },

    surfactantHeld() {
      const { network, state } = system;
      const { nodes, films } = network;
      let held = 0;
      for (let i = 0; i < nodes.bubbleCount; i++) {
        if (nodes.kind[i] !== BUBBLE || alive[i] === 0) continue;
        const area = faceArea(nodes.mouth[i]!, state.size[i]!);
        const film = films[nodes.film[i]!]!;
        film.evaluate(nodes.surfactant[i]!, nodes.liquid[i]!, area, state.coverage[i]!, filmOut);
        held += nodes.faces[i]! * film.held(nodes.surfactant[i]!, nodes.liquid[i]!, area, filmOut);
      }
      return held;
    },
  };
}
