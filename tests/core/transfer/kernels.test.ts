/** What every kind of link owes to the network: what leaves one end arrives at the other, and its three answers agree. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { LINK_KERNELS } from '../../../core/transfer/register.ts';
import { randomNetwork } from './random-documents.ts';
import { sample } from './sample-networks.ts';

const seeds = fc.nat(2 ** 31);

describe('a link of any kind', () => {
  it('gives to one end what it takes from the other, to the last bit', () => {
    const seen = new Set<string>();
    fc.assert(
      fc.property(seeds, (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        const { system, network, y } = drawn;
        const species = network.species.length;
        system.evaluate(t, y, false);
        for (const { group, kernel } of system.groups) {
          seen.add(group.table.kind);
          for (let l = 0; l < group.table.count; l++) {
            const alone = { ...group, active: Int32Array.of(l), activeCount: 1 };
            const out = new Float64Array(system.size);
            kernel.addRates(alone, system.state, t, out);
            const flow = new Float64Array(species);
            kernel.flow(group, l, system.state, t, flow);
            const [i, j] = [group.table.from[l]!, group.table.to[l]!];
            for (let k = 0; k < species; k++) {
              expect(out[j * species + k]).toBe(-out[i * species + k]!);
              // The same products in another order: a few roundings of the flow itself.
              expect(Math.abs(out[j * species + k]! - flow[k]!)).toBeLessThanOrEqual(1e-15 * Math.abs(flow[k]!));
            }
            // No other node hears of it.
            out.fill(0, i * species, (i + 1) * species);
            out.fill(0, j * species, (j + 1) * species);
            expect(out.every((one) => one === 0)).toBe(true);
          }
        }
      }),
      { seed: 4, numRuns: 300 },
    );
    expect([...seen].sort()).toEqual(Object.keys(LINK_KERNELS).sort());
  });

  it('passes its conductance times what drives it: the difference of partial pressures, or of whole pressures in a tube', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        const { system, network, y } = drawn;
        const species = network.species.length;
        const { state } = system;
        system.evaluate(t, y, false);
        for (const { group, kernel } of system.groups) {
          for (let l = 0; l < group.table.count; l++) {
            const [flow, conductance] = [new Float64Array(species), new Float64Array(species)];
            kernel.flow(group, l, state, t, flow);
            kernel.conductance(group, l, state, t, conductance);
            const [i, j] = [group.table.from[l]!, group.table.to[l]!];
            if (kernel.diffusive) {
              for (let k = 0; k < species; k++) {
                const difference = state.partial[i * species + k]! - state.partial[j * species + k]!;
                expect(conductance[k]).toBeGreaterThan(0);
                // Two or three products in another order.
                expect(Math.abs(flow[k]! - conductance[k]! * difference)).toBeLessThanOrEqual(
                  1e-15 * Math.abs(flow[k]!),
                );
              }
            } else {
              const whole = flow.reduce((sum, one) => sum + one, 0);
              const difference = state.pressure[i]! - state.pressure[j]!;
              expect(conductance[0]).toBeGreaterThan(0);
              // And a sum of three shares; partial pressures share the whole to rounding.
              expect(Math.abs(whole - conductance[0]! * difference)).toBeLessThanOrEqual(3e-15 * Math.abs(whole));
              const up = difference >= 0 ? i : j;
              for (let k = 0; k < species; k++) {
                const share = state.partial[up * species + k]! / state.pressure[up]!;
                expect(Math.abs(flow[k]! - share * whole)).toBeLessThanOrEqual(3e-15 * Math.abs(whole));
              }
            }
          }
        }
      }),
      { seed: 5, numRuns: 300 },
    );
  });

  it('drawn the other way round carries the same gas', () => {
    const bubbles = [
      { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 2, helium: 1 } },
      { id: 'B', kind: 'bubble', radius: '0.4 mm', gas: { air: 1, helium: 3 } },
    ];
    const links = [
      { kind: 'tube', bore: '0.1 mm', length: '10 mm' },
      { kind: 'film', area: '0.1 mm^2', thickness: '1 um' },
      { kind: 'film', area: { share: 0.3 }, thickness: '1 um' },
      { kind: 'liquid', distance: '5 mm' },
    ];
    for (const link of links) {
      const there = sample({ nodes: bubbles, links: [{ id: 'l', from: 'A', to: 'B', ...link }] });
      const back = sample({ nodes: bubbles, links: [{ id: 'l', from: 'B', to: 'A', ...link }] });
      const [one, other] = [there.flow('l'), back.flow('l')];
      for (const k of [0, 1]) {
        // The sum 1/R_i + 1/R_j - 2/d is taken in another order: one rounding.
        expect(Math.abs(one[k]! + other[k]!)).toBeLessThanOrEqual(1e-15 * Math.abs(one[k]!));
        expect(one[k]).not.toBe(0);
      }
    }
  });
});
