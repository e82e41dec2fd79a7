/** Gas and surfactant are neither lost nor made: over vanishings, joined neighbours, feeds, pools and several gases. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../../run-scenario.ts';

const RECIPES = {
  pure: { tension: { law: 'constant', clean: '40 mN/m' } },
  insoluble: {
    tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '1 mol/m^3' },
    loading: { coverage: 0.8 },
    supply: { kind: 'none' },
  },
  closed: {
    tension: {
      law: 'frumkin',
      clean: '72 mN/m',
      saturation: '4 umol/m^2',
      szyszkowski: '0.05 mol/m^3',
      attraction: 0.5,
    },
    loading: { coverage: 0.85 },
    supply: { kind: 'closed-film', thickness: '500 nm' },
  },
};

const network = fc.record({
  radii: fc.array(fc.double({ min: 12, max: 50, noNaN: true }), { minLength: 2, maxLength: 6 }),
  recipes: fc.array(fc.constantFrom('pure', 'pure', 'insoluble', 'closed'), { minLength: 6, maxLength: 6 }),
  shares: fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 6, maxLength: 6 }),
  links: fc.array(fc.tuple(fc.nat(5), fc.nat(5)), { minLength: 2, maxLength: 7 }),
  pool: fc.option(fc.double({ min: 0.2, max: 1.5, noNaN: true })),
  feed: fc.option(fc.double({ min: -1, max: 20, noNaN: true })), // fmol/s
  onVanish: fc.constantFrom('drop', 'join-neighbours'),
});

describe('gas and surfactant', () => {
  it('balance to 1e-12 over any small network, whatever vanishes', () => {
    let vanished = 0;
    fc.assert(
      fc.property(network, ({ radii, recipes, shares, links, pool, feed, onVanish }) => {
        const count = radii.length;
        const bubbles = radii.map((radius, i) => ({
          id: `b${i}`,
          kind: 'bubble',
          radius: `${radius} um`,
          recipe: recipes[i]!,
          gas: { air: 0.1 + shares[i]!, helium: 1.1 - shares[i]! },
          ...(i === 0 && feed !== null ? { feed: { rate: `${feed} fmol/s`, gas: { helium: 1 } } } : {}),
        }));
        const films = links
          .map(([a, b]) => [a % count, b % count] as const)
          .filter(([a, b]) => a !== b)
          .map(([a, b], l) => ({
            id: `f${l}`,
            kind: 'film',
            from: `b${a}`,
            to: `b${b}`,
            area: { share: 0.3 },
            thickness: '1 um',
          }));
        const liquid =
          pool === null ? [] : bubbles.map(({ id }) => ({ id: `l${id}`, kind: 'liquid', from: id, to: 'W' }));
        const { result, frames } = carryThrough({
          gases: { air: {}, helium: {} },
          recipes: RECIPES,
          nodes: [
            ...bubbles,
            ...(pool === null
              ? []
              : [{ id: 'W', kind: 'pool', volume: '1 nL', saturation: pool, gas: { air: 1, helium: 1 } }]),
          ],
          links: [...films, ...liquid],
          run: { until: '200 s', frames: 3, onVanish },
        });
        vanished += result.eventCounts['bubble-vanished'] ?? 0;
        expect(result.worstGasBalance).toBeLessThan(1e-12);
        expect(result.worstSurfactantBalance).toBeLessThan(1e-12);
        for (const frame of frames) expect(Math.abs(frame.gasBalance)).toBeLessThan(1e-12);
      }),
      { seed: 3, numRuns: 40 },
    );
    // The property says nothing where nothing happens.
    expect(vanished).toBeGreaterThan(20);
  });

  it('balance where dying bubbles are carried apart, in every frame', () => {
    const count = 40;
    const { result, frames } = carryThrough({
      gases: { air: {}, helium: {} },
      nodes: [
        ...Array.from({ length: count }, (_, i) => ({
          id: `b${i}`,
          kind: 'bubble',
          radius: `${15 + ((7 * i) % 23)} um`,
          gas: { air: 1, helium: (i % 5) / 4 },
        })),
        { id: 'W', kind: 'pool', volume: '10 nL', saturation: 1, gas: { air: 1, helium: 1 } },
      ],
      links: [
        ...Array.from({ length: count }, (_, i) => ({ id: `l${i}`, kind: 'liquid', from: `b${i}`, to: 'W' })),
        ...Array.from({ length: count - 1 }, (_, i) => ({
          id: `f${i}`,
          kind: 'film',
          from: `b${i}`,
          to: `b${i + 1}`,
          area: { share: 0.2 },
          thickness: '1 um',
        })),
      ],
      run: { until: '300 s', frames: 60 },
    });
    expect(result.eventCounts['bubble-vanished']).toBeGreaterThan(10);
    expect(result.worstGasBalance).toBeLessThan(1e-12);
    for (const frame of frames) expect(Math.abs(frame.gasBalance)).toBeLessThan(1e-12);
  });

  it('pass from a bubble that vanishes to the neighbour that is left', () => {
    const { frames } = carryThrough({
      nodes: [
        { id: 'A', kind: 'bubble', radius: '20 um' },
        { id: 'B', kind: 'bubble', radius: '30 um' },
      ],
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '100 um^2', thickness: '1 um' }],
      run: { until: '1 h', frames: 2 },
    });
    const [first, last] = [frames[0]!, frames.at(-1)!];
    expect(last.amount.A).toBe(0);
    expect(Math.abs(last.amount.B! / (first.amount.A! + first.amount.B!) - 1)).toBeLessThan(1e-13);
  });
});
