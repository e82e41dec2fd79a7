/** Bubbles of the main system that end inside a step: vanished, or drawn flat into their mouths. */
import type { Build } from './build.ts';
import type { Inside } from './inside.ts';

/** A cap lower than this share of its mouth's radius counts as flat: below it the film is drawn into the mouth. */
const FLATTEST = 1e-3;

export interface Fall {
  readonly node: number;
  readonly time: number;
  readonly kind: 'vanished' | 'flat';
}

/** How far bubble i is from its end: from the vanish radius of a free sphere, from flatness of a cap; relative. */
function room(build: Build, vanishRadius: number, i: number): number {
  const { nodes } = build.network;
  const { state } = build.system;
  const mouth = nodes.mouth[i]!;
  return mouth > 0 ? state.size[i]! / (FLATTEST * mouth) - 1 : state.size[i]! / vanishRadius - 1;
}

/**
 * The first bubble of the main system that ends inside the step from t to `end`. Bubbles that are carried apart end by themselves.
 */
export function firstFall(build: Build, inside: Inside, t: number, end: number, vanishRadius: number): Fall | null {
  if (!inside.lookAt(end)) {
    // The end of the step lies beyond a bubble's end: bring the end nearer until every bubble has a state.
    let [low, high] = [t, end];
    while (high - low > 1e-12 * Math.max(end, 1e-300) && high - low > (end - t) * 1e-9) {
      const middle = 0.5 * (low + high);
      if (inside.lookAt(middle)) low = middle;
      else high = middle;
    }
    if (!inside.lookAt(low)) return null;
    end = low;
  }
  let first: Fall | null = null;
  const { state } = build.system;
  for (let list = 0; list < 2; list++) {
    const [index, count] = list === 0 ? [state.spheres, state.sphereCount] : [state.shaped, state.shapedCount];
    for (let q = 0; q < count; q++) {
      const i = index[q]!;
      if (room(build, vanishRadius, i) > 0) continue;
      const until = first ? first.time : end;
      const at = (when: number): number => (inside.lookAtNodes(when, [i]) ? room(build, vanishRadius, i) : -1);
      const time = inside.passage(t, at(t), until, at(until), [i], () => room(build, vanishRadius, i));
      if (first === null || time < first.time) {
        first = { node: i, time, kind: build.network.nodes.mouth[i]! > 0 ? 'flat' : 'vanished' };
      }
    }
  }
  return first;
}

/** What is shorter than this share of the time that has passed is lost in the clock's rounding. */
const MOMENT = 1e-11;

/**
 * A bubble that no step was short enough to follow, because all that is left of it passes within the rounding of the clock: through a
 * tube R^4 falls linearly, and the last decades of R take no time. Null where something else is in the way.
 * @param worst the unknown that the step failed by
 */
export function vanishedAtOnce(build: Build, worst: number, scratch: Float64Array): Fall | null {
  const { network, system, stepper, alive } = build;
  const species = network.species.length;
  const node = Math.floor(worst / species);
  if (node >= network.nodes.bubbleCount || alive[node] === 0 || network.nodes.mouth[node]! > 0) return null;
  const t = stepper.time;
  system.rates(t, stepper.state, scratch);
  let amount = 0;
  let rate = 0;
  for (let k = 0; k < species; k++) {
    amount += stepper.state[node * species + k]!;
    rate += scratch[node * species + k]!;
  }
  return -rate * MOMENT * t > amount ? { node, time: t, kind: 'vanished' } : null;
}
