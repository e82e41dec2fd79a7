/**
 * Looks inside the last step of a build: the whole state at any instant of it, or that of a few nodes, with node states to match.
 * Which instant node states stand for is kept here, so that nothing is evaluated twice.
 */
import { activateBubble, setActiveBubbles } from '../network/node-state.ts';
import type { Build } from './build.ts';
import { findPassage } from './locate.ts';
import type { Looking } from './watch.ts';

export interface Inside extends Looking {
  /** The instant that node states stand for, s; NaN: for none in particular. */
  standing: number;
  /** The state that was looked at last; an array of the build's size. */
  readonly work: Float64Array;
  /** Puts `work` to the whole state at time t inside the last step. */
  read(t: number): Float64Array;
  /** Who lives in a whole state inside the last step: bubbles that are carried apart may have vanished on the way. */
  livingIn(y: Float64Array): Uint8Array;
  /** Back to evaluating what the main system moves. */
  resumeActive(): void;
}

/** @param tolerance of the run: instants are found to a thousandth of it, against the length of the step */
export function lookInside(build: Build, tolerance: number): Inside {
  const { network, system, alive, carried, observation } = build;
  const { state } = system;
  const species = network.species.length;
  const work = new Float64Array(system.size);
  const living = new Uint8Array(network.nodes.count);

  const inside: Inside = {
    standing: NaN,
    work,

    read(t) {
      build.stepper.interpolate(t, work);
      carried?.complete(t, work);
      return work;
    },

    lookAt(t) {
      if (t === inside.standing) return true;
      inside.read(t);
      if (carried) setActiveBubbles(state, inside.livingIn(work));
      const found = system.evaluate(t, work, observation.needsSlopes);
      inside.resumeActive();
      inside.standing = found ? t : NaN;
      return found;
    },

    livingIn(y) {
      if (carried === null) return alive;
      living.set(alive);
      for (const i of carried.members) {
        let n = 0;
        for (let k = 0; k < species; k++) n += y[i * species + k]!;
        if (n === 0) living[i] = 0;
      }
      return living;
    },

    resumeActive() {
      if (carried === null) return;
      living.set(alive);
      for (const i of carried.members) living[i] = 0;
      setActiveBubbles(state, living);
    },

    lookAtNodes(t, few) {
      const { stepper } = build;
      inside.standing = NaN;
      const [spheres, shaped] = [state.sphereCount, state.shapedCount];
      const firstSpheres = state.spheres.slice(0, few.length);
      const firstShaped = state.shaped.slice(0, few.length);
      state.sphereCount = state.shapedCount = 0;
      for (const i of few) {
        if (i >= network.nodes.bubbleCount) continue;
        activateBubble(state, i);
        if (carried?.isMember(i) === true) carried.completeOne(t, i, work);
        else for (let k = 0; k < species; k++) work[i * species + k] = stepper.interpolateOne(t, i * species + k);
      }
      for (const i of state.rigid) {
        for (let k = 0; k < species; k++) work[i * species + k] = stepper.interpolateOne(t, i * species + k);
      }
      const found = system.evaluate(t, work, observation.needsSlopes);
      state.spheres.set(firstSpheres);
      state.shaped.set(firstShaped);
      state.sphereCount = spheres;
      state.shapedCount = shaped;
      return found;
    },

    passage(a, fa, b, fb, nodes, quantity) {
      const at = (t: number): number => (inside.lookAtNodes(t, nodes) ? quantity(t) : -1);
      return findPassage(at, a, fa, b, fb, Math.max(4e-16 * b, 1e-3 * tolerance * (b - a)));
    },
  };
  return inside;
}
