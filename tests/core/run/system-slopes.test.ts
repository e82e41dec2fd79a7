/** The Jacobian and the time derivative of whole random networks against central differences of their rates. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { NetworkSystem } from '../../../core/run/system.ts';
import { randomNetwork, type LinkSort, type Wanted } from '../transfer/random-documents.ts';
import { linearised, sample, type Sample } from '../transfer/sample-networks.ts';

const EPSILON = 2 ** -52;

/**
 * For every unknown, the size of what its rate is summed of: the flows that each link would carry against a vacuum, which cancel
 * for the most part, and the rate itself with its feed. Its roundings are a few EPSILON of this.
 */
function gross(system: NetworkSystem, t: number, y: Float64Array): Float64Array {
  const species = system.network.species.length;
  const { state } = system;
  const out = new Float64Array(system.size);
  system.rates(t, y, out); // leaves the state evaluated
  for (let u = 0; u < out.length; u++) out[u] = Math.abs(out[u]!);
  const g = new Float64Array(species);
  for (const { group, kernel } of system.groups) {
    for (let l = 0; l < group.table.count; l++) {
      kernel.conductance(group, l, state, t, g);
      const [i, j] = [group.table.from[l]!, group.table.to[l]!];
      for (let k = 0; k < species; k++) {
        const carried = (kernel.diffusive ? g[k]! : g[0]!) * (state.pressure[i]! + state.pressure[j]!);
        out[i * species + k]! += carried;
        out[j * species + k]! += carried;
      }
    }
  }
  return out;
}

/** Which way every tube blows and which bubble of every film is the smaller: where this changes, a rate has a kink. */
function sides(system: NetworkSystem, t: number, y: Float64Array): string {
  const { state } = system;
  system.evaluate(t, y, false);
  return system.groups
    .flatMap(({ group: { table } }) =>
      Array.from(table.from, (i, l) => {
        const j = table.to[l]!;
        return `${Number(state.pressure[i]! >= state.pressure[j]!)}${Number(state.radius[i]! < state.radius[j]!)}`;
      }),
    )
    .join();
}

interface Slope {
  /** Central difference. */
  readonly value: Float64Array;
  /** What it may be wrong by. */
  readonly error: Float64Array;
}

/**
 * Central difference of the rates with its own error: truncation from a step twice as long (the shorter one errs by a third of
 * what they differ by; all of it is allowed), and rounding, of `gross` over the step. A pressure that rests on a radius solved
 * to rounding, on a film and a viscosity, has of the order of ten roundings; 64 are allowed.
 * @returns null where a kink lies within the step
 */
function difference(
  system: NetworkSystem,
  at: (shift: number) => readonly [number, Float64Array],
  h: number,
): Slope | null {
  const here = sides(system, ...at(0));
  if ([-2, -1, 1, 2].some((m) => sides(system, ...at(m * h)) !== here)) return null;
  const rates = (shift: number): Float64Array => {
    const out = new Float64Array(system.size);
    system.rates(...at(shift), out);
    return out;
  };
  const central = (step: number): Float64Array => {
    const [up, down] = [rates(step), rates(-step)];
    return up.map((one, u) => (one - down[u]!) / (2 * step));
  };
  const [fine, coarse] = [central(h), central(2 * h)];
  const rounding = gross(system, ...at(0)).map((size) => (64 * EPSILON * size) / h);
  return { value: fine, error: fine.map((one, u) => Math.abs(one - coarse[u]!) + rounding[u]!) };
}

/** Compares one column; returns how blind the measure was to it: what is allowed on its largest entry, as a share of that. */
function compare(column: readonly number[], slope: Slope): number {
  let largest = 0;
  column.forEach((entry, u) => {
    expect(Math.abs(entry - slope.value[u]!)).toBeLessThanOrEqual(slope.error[u]!);
    if (Math.abs(entry) > Math.abs(column[largest]!)) largest = u;
  });
  return column[largest] === 0 ? 0 : slope.error[largest]! / Math.abs(column[largest]!);
}

/** Holds every column of one network to differences; returns the blindness of each column compared. */
function holdJacobian({ system, y }: Sample, t: number): number[] {
  const { jacobian } = linearised(system, t, y);
  const blindness: number[] = [];
  for (let u = 0; u < system.size; u++) {
    // A step of 1e-4 of the amount: truncation of the order of 1e-8, rounding of 64 EPSILON p/(1e-4 dp) = 1e-7.
    const slope = difference(
      system,
      (shift) => {
        const moved = y.slice();
        moved[u]! += shift;
        return [t, moved];
      },
      1e-4 * (y[u] === 0 ? 1e-9 : Math.abs(y[u]!)),
    );
    if (slope !== null)
      blindness.push(
        compare(
          jacobian.map((row) => row[u]!),
          slope,
        ),
      );
  }
  return blindness;
}

const KINDS: readonly (readonly [name: string, links: readonly LinkSort[]])[] = [
  ['tubes', ['tube']],
  ['films of fixed area', ['film-area']],
  ['films that share a section', ['film-share']],
  ['liquid paths between bubbles', ['liquid']],
  ['paths to pools', ['pool']],
  ['paths to pools that still fill', ['transient']],
];

const share = (list: readonly number[], below: number): number =>
  list.filter((one) => one < below).length / list.length;

describe('the Jacobian of a network', () => {
  for (const [name, links] of KINDS) {
    for (const species of [1, 2, 3] as const) {
      it(`of ${name} with ${species} ${species === 1 ? 'gas' : 'gases'} is that of differences of its rates`, () => {
        const blindness: number[] = [];
        fc.assert(
          fc.property(fc.nat(2 ** 31), (seed) => {
            const { sample: drawn, t } = randomNetwork(seed, { links, species });
            blindness.push(...holdJacobian(drawn, t));
          }),
          { seed: 6, numRuns: 15 },
        );
        // The measure sees a ten-thousandth of the largest entry in nearly every column; in one whose terms nearly cancel, less.
        expect(blindness.length).toBeGreaterThan(50);
        expect(share(blindness, 1e-4)).toBeGreaterThan(0.95);
      });
    }
  }

  it('of all kinds of links together is that of differences of its rates, whatever the shape of the matrix', () => {
    const blindness: number[] = [];
    fc.assert(
      fc.property(fc.nat(2 ** 31), (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        blindness.push(...holdJacobian(drawn, t));
      }),
      { seed: 7, numRuns: 40 },
    );
    expect(share(blindness, 1e-4)).toBeGreaterThan(0.95);
  });

  it('is there at once for a path to a pool at the very start of a run', () => {
    // The start-up term is held at an instant that is a share of R^2/D (core/transfer/liquid-path.ts), so it follows the radius.
    const start = sample({
      nodes: [
        { id: 'A', kind: 'bubble', radius: '0.5 mm', gas: { air: 1 } },
        { id: 'W', kind: 'pool', volume: '1 L', saturation: 0.5 },
      ],
      links: [{ id: 'l', kind: 'liquid', from: 'A', to: 'W', transient: true }],
    });
    expect(holdJacobian(start, 0).every((one) => one < 1e-4)).toBe(true);
  });
});

/** Holds d(rates)/dt at constant amounts to differences; returns null at a kink. */
function holdTimeDerivative({ system, y }: Sample, t: number): number | null {
  const { timeDerivative } = linearised(system, t, y);
  // The periods drawn are 0.5 s and longer: 1e-3 s is 1/80 of a radian, truncation 3e-5.
  const slope = difference(system, (shift) => [t + shift, y], 1e-3);
  return slope === null ? null : compare([...timeDerivative], slope);
}

describe('the time derivative of the rates at constant amounts', () => {
  it('is that of differences where the vessel, reservoirs and feeds move', () => {
    const blindness: number[] = [];
    const seen: Wanted[] = [{}, { species: 1 }, { species: 3 }];
    for (const wanted of seen) {
      fc.assert(
        fc.property(fc.nat(2 ** 31), (seed) => {
          const { sample: drawn, t } = randomNetwork(seed, wanted);
          const blind = holdTimeDerivative(drawn, t);
          if (blind !== null) blindness.push(blind);
        }),
        { seed: 8, numRuns: 60 },
      );
    }
    expect(blindness.length).toBeGreaterThan(60);
    expect(share(blindness, 1e-2)).toBeGreaterThan(0.9);
  });

  it('is nil where nothing moves', () => {
    const { sample: drawn } = randomNetwork(3, { still: true, links: ['tube', 'film-share', 'pool'] });
    expect(linearised(drawn.system, 1, drawn.y).timeDerivative.every((one) => one === 0)).toBe(true);
  });

  it('carries the vessel through the radii of a film that shares a section and of a path to a pool', () => {
    const breathing = sample({
      ambient: { pressure: { wave: 'sine', mean: 101325, amplitude: 5000, period: 1 } },
      nodes: [
        { id: 'A', kind: 'bubble', radius: '0.5 mm', gas: { air: 2, helium: 1 } },
        { id: 'B', kind: 'bubble', radius: '0.3 mm', mouth: '0.2 mm', gas: { air: 1, helium: 1 } },
        { id: 'W', kind: 'pool', volume: '1 L', saturation: 0.5, gas: { air: 1 } },
      ],
      links: [
        { id: 'f', kind: 'film', from: 'A', to: 'B', area: { share: 0.3 }, thickness: '1 um' },
        { id: 'l', kind: 'liquid', from: 'A', to: 'B', distance: '2 mm' },
        { id: 'a', kind: 'liquid', from: 'A', to: 'W', transient: true },
        { id: 'b', kind: 'liquid', from: 'W', to: 'B' },
      ],
    });
    expect(holdTimeDerivative(breathing, 0.3)).toBeLessThan(1e-3);
  });
});
