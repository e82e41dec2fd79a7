/** How fast a network can be, from its links alone: never less than its true fastest rate, and not much more. */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { randomNetwork, type Wanted } from '../transfer/random-documents.ts';
import { linearised, sample, type Sample } from '../transfer/sample-networks.ts';

/** The largest size of an eigenvalue of the assembled Jacobian, 1/s. */
function spectralRadius({ system, y }: Sample, t: number): number {
  const { jacobian } = linearised(system, t, y);
  const { realEigenvalues, imaginaryEigenvalues } = new EigenvalueDecomposition(new Matrix(jacobian));
  return Math.max(...realEigenvalues.map((real, k) => Math.hypot(real, imaginaryEigenvalues[k]!)));
}

/** Bound over truth on many random networks. */
function ratios(wanted: Wanted, seed: number, numRuns: number): number[] {
  const list: number[] = [];
  fc.assert(
    fc.property(fc.nat(2 ** 31), (network) => {
      const { sample: drawn, t } = randomNetwork(network, wanted);
      const bound = drawn.system.rateBound(t, drawn.y);
      const radius = spectralRadius(drawn, t);
      if (bound === 0) {
        expect(radius).toBe(0);
        return;
      }
      list.push(bound / radius);
    }),
    { seed, numRuns },
  );
  return list;
}

describe('the bound on the fastest rate', () => {
  it('is never below the fastest true rate, in any network', () => {
    // The largest column sum of sizes is a norm, and no eigenvalue passes a norm. The QR algorithm rounds at 1e-15 of the norm;
    // a matrix of exchange with zero eigenvalues beside it costs it some digits.
    for (const ratio of ratios({}, 13, 300)) expect(ratio).toBeGreaterThan(1 - 1e-9);
    for (const ratio of ratios({ species: 1 }, 14, 200)) expect(ratio).toBeGreaterThan(1 - 1e-9);
  });

  it('is at most twice the fastest true rate where bubbles of one gas all run away alike', () => {
    // Through films of fixed area the Jacobian is -Lap U with U of one sign: similar to the symmetric |U|^(1/2) Lap |U|^(1/2), whose
    // largest eigenvalue is not below its largest diagonal entry; a column sum of Lap U is twice its diagonal entry.
    const list = ratios({ bare: true, bubblesOnly: true, species: 1, links: ['film-area'] }, 15, 200);
    expect(list.length).toBeGreaterThan(150);
    expect(Math.max(...list)).toBeLessThan(2 + 1e-9);
  });

  it('is a small factor above the truth in nearly all networks of all kinds', () => {
    // Measured on these seeds: half are below 2.5, nineteen in twenty below 4.5.
    const list = ratios({}, 16, 300).sort((a, b) => a - b);
    expect(list[Math.floor(0.5 * list.length)]).toBeLessThan(3);
    expect(list[Math.floor(0.95 * list.length)]).toBeLessThan(5);
  });

  it('errs to the safe side for a pair that is nearly neutral: each end is fast, the two together are slow', () => {
    const pair = (volume: number): Sample =>
      sample({
        recipes: { bare: { tension: { law: 'constant', clean: 0.072 } } },
        nodes: [
          { id: 'A', kind: 'bubble', radius: '1 mm', recipe: 'bare', gas: { air: 1 } },
          { id: 'M', kind: 'cavity', volume, pressure: 101325 + 144, gas: { air: 1 } },
        ],
        links: [{ id: 't', kind: 'tube', from: 'A', to: 'M', bore: '0.1 mm', length: '10 mm' }],
      });
    // u of the cavity is R T/V: a volume at which it is that of the bubble with the sign turned.
    const probe = pair(1e-6);
    probe.system.evaluate(0, probe.y, true);
    const [bubble, cavity] = probe.system.state.stiffness;
    expect(bubble).toBeLessThan(0);
    const neutral = pair((1e-6 * cavity!) / -bubble!);
    const bound = neutral.system.rateBound(0, neutral.y);
    const G = neutral.conductance('t')[0]!;
    // Two entries of G |u| in either column.
    expect(bound / (2 * G * -bubble!)).toBeCloseTo(1, 9);
    expect(spectralRadius(neutral, 0)).toBeLessThan(1e-6 * bound);
  });

  it('sums the sizes of what each link alone does, link by link', () => {
    fc.assert(
      fc.property(fc.nat(2 ** 31), (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        const { system, network, y } = drawn;
        system.evaluate(t, y, true);
        const bound = system.rateBound(t, y);
        const all = Uint8Array.from({ length: network.nodes.count }, () => 1);
        const shut = network.links.map(({ count }) => new Uint8Array(count));
        const sums = new Float64Array(system.size);
        for (const [g, { count }] of network.links.entries()) {
          for (let l = 0; l < count; l++) {
            shut[g]![l] = 1;
            system.setActive(all, shut);
            shut[g]![l] = 0;
            for (const row of linearised(system, t, y).jacobian) {
              row.forEach((entry, column) => (sums[column]! += Math.abs(entry)));
            }
          }
        }
        // Slopes of bubbles whose Newton iterate is not the same to the last: 1e-8 of the size (core/network/shaped.ts).
        expect(Math.abs(bound - Math.max(...sums))).toBeLessThanOrEqual(1e-7 * bound);
        // And with everything shut nothing is fast.
        system.setActive(all, shut);
        expect(system.rateBound(t, y)).toBe(0);
      }),
      { seed: 17, numRuns: 60 },
    );
  });
});
