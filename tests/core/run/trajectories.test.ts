/**
 * Whole runs against trajectories that a general-purpose solver made of the laws alone, at a tolerance of 1e-12:
 * tests/references/trajectories.py. The documents in trajectories.json are what both were given.
 */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { carryThrough, type Carried } from '../../run-scenario.ts';

interface Reference {
  readonly what: string;
  readonly document: {
    readonly nodes: readonly { readonly id: string; readonly kind: string }[];
    readonly run: object;
  };
  /** Largest relative difference between the two solvers of the reference. */
  readonly difference: number;
  readonly times: readonly number[];
  /** One row a time, one entry a bubble; 0 once vanished. */
  readonly radii: readonly (readonly number[])[];
  readonly gone: readonly { readonly bubble: string; readonly time: number }[];
}

const references = JSON.parse(
  readFileSync(new URL('../../references/trajectories.json', import.meta.url), 'utf8'),
) as Readonly<Record<string, Reference>>;

/**
 * The run's tolerance is that of one step; over a run errors add up, and where bubbles run apart they grow with them: by e for
 * each e-folding, and once more near the end of the small one, where the radius falls with an infinite slope.
 */
const ERRORS_OF_A_RUN = 10;

/** Where the explicit method can go: networks that adjust no faster than a thousandth of the run, and do not empty through a tube. */
const NOT_STIFF = ['held-by-film', 'slow-gas', 'pool'];

function run(reference: Reference, method: string, tolerance: number): Carried {
  return carryThrough({ ...reference.document, run: { ...reference.document.run, method, tolerance } });
}

/** Largest relative difference of a radius in any frame. */
function worstRadius({ frames }: Carried, { document, radii }: Reference): number {
  const bubbles = document.nodes.filter((node) => node.kind === 'bubble').map((node) => node.id);
  let worst = 0;
  radii.forEach((row, at) =>
    row.forEach((expected, b) => {
      const radius = frames[at]!.radius[bubbles[b]!]!;
      worst = Math.max(worst, expected === 0 ? (radius === 0 ? 0 : Infinity) : Math.abs(radius / expected - 1));
    }),
  );
  return worst;
}

for (const [name, reference] of Object.entries(references)) {
  describe(`a run of ${reference.what}`, () => {
    for (const method of ['auto', 'stiff', ...(NOT_STIFF.includes(name) ? ['explicit'] : [])]) {
      for (const tolerance of [1e-5, 1e-8]) {
        it(`has the radii of the reference, ${method}, tolerance ${tolerance}`, () => {
          const carried = run(reference, method, tolerance);
          expect(carried.result.stop.kind).toBe('done');
          expect(carried.frames.map((frame) => frame.time)).toEqual(reference.times);
          expect(worstRadius(carried, reference)).toBeLessThan(ERRORS_OF_A_RUN * tolerance);
        });

        it(`tells what vanishes, and when, ${method}, tolerance ${tolerance}`, () => {
          const told = run(reference, method, tolerance).events.filter(({ event }) => event === 'bubble-vanished');
          expect(told.map(({ subject }) => subject)).toEqual(reference.gone.map(({ bubble }) => bubble));
          told.forEach(({ time }, q) => {
            expect(Math.abs(time / reference.gone[q]!.time - 1)).toBeLessThan(ERRORS_OF_A_RUN * tolerance);
          });
        });
      }
    }

    it('loses no gas', () => {
      // Issue 2: to 1e-12. Amounts are the state, so only rounding can lose any.
      expect(run(reference, 'auto', 1e-6).result.worstGasBalance).toBeLessThan(1e-12);
    });
  });
}

describe('the references', () => {
  it('are surer than anything they are asked for', () => {
    for (const { difference } of Object.values(references)) expect(difference).toBeLessThan(1e-10);
  });
});
