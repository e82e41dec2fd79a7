/** The links of a document as tables, one a kind, with the coefficients that each kind's kernel states in core/transfer. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { filmPermeance } from '../../../core/network/compile-links.ts';
import type { LinkKind, LinkTable } from '../../../core/network/network.ts';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { sample } from '../transfer/sample-networks.ts';

// Helium and air in water, core/substances/gases.ts; in the order in which the file names them.
const D = [7.28e-9, 2.1e-9] as const;
const H = [3.8e-6, 7.8e-6] as const;
const RT = GAS_CONSTANT * 300;

const every = sample({
  temperature: 300,
  nodes: [
    { id: 'W', kind: 'pool', volume: '1 L', gas: { helium: 1 } },
    { id: 'M', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: { air: 1 } },
    { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1 }, at: [0, 0, 0] },
    { id: 'B', kind: 'bubble', radius: '2 mm', gas: { air: 1 }, at: ['3 mm', '4 mm', '12 mm'] },
  ],
  links: [
    { id: 'still', kind: 'liquid', from: 'A', to: 'W' },
    { id: 'wide', kind: 'tube', from: 'A', to: 'M', bore: '2 mm', length: '30 mm' },
    { id: 'skin', kind: 'film', from: 'A', to: 'B', area: '0.5 mm^2', thickness: '1 um', monolayer: '2 mm/s' },
    { id: 'apart', kind: 'liquid', from: 'A', to: 'B' },
    { id: 'thick', kind: 'film', from: 'B', to: 'A', area: { share: 0.2 }, thickness: '3 um', open: [[1, 2]] },
    { id: 'narrow', kind: 'tube', from: 'M', to: 'B', bore: '1 mm', length: '30 mm', viscosity: 2e-5 },
    { id: 'given', kind: 'film', from: 'A', to: 'B', area: '2 mm^2', permeance: 3e-8 },
    { id: 'early', kind: 'liquid', from: 'W', to: 'B', transient: true },
    { id: 'told', kind: 'liquid', from: 'A', to: 'B', distance: '5 mm' },
  ],
});
const { network } = every;
const tableOf = (kind: LinkKind): LinkTable => network.links.find((one) => one.kind === kind)!;
const names = (table: LinkTable): string[] => Array.from(table.origin, network.linkName);
const close = (got: number | undefined, expected: number): void => {
  // Half a dozen products.
  expect(Math.abs(got! / expected - 1)).toBeLessThan(2e-15);
};

describe('the links of a network', () => {
  it('stand one table a kind, in the order of the file, by their names', () => {
    expect(network.links.map((table) => [table.kind, names(table)])).toEqual([
      ['tube', ['wide', 'narrow']],
      ['film-area', ['skin', 'given']],
      ['film-share', ['thick']],
      ['liquid-path', ['apart', 'told']],
      ['pool-path', ['still', 'early']],
    ]);
    expect(network.links.map(({ count }) => count)).toEqual([2, 2, 1, 2, 2]);
  });

  it('join the nodes that the file names, in its direction', () => {
    for (const table of network.links) {
      for (let l = 0; l < table.count; l++) {
        const ends = [table.from[l]!, table.to[l]!].map((i) => network.nodeName(network.nodes.origin[i]!));
        const written = {
          still: 'A W',
          wide: 'A M',
          skin: 'A B',
          apart: 'A B',
          thick: 'B A',
          narrow: 'M B',
          given: 'A B',
          early: 'W B',
          told: 'A B',
        };
        expect(ends.join(' ')).toBe(written[names(table)[l] as keyof typeof written]);
      }
    }
  });

  it('of no kind that the file lacks leave no table behind', () => {
    expect(sample({ nodes: [{ id: 'A', kind: 'bubble', radius: 1e-3, gas: { air: 1 } }] }).network.links).toEqual([]);
  });

  it('keep the schedule of a valve, and none where there is no valve', () => {
    expect(tableOf('film-share').open).toEqual([[[1, 2]]]);
    expect(tableOf('tube').open).toEqual([null, null]);
  });
});

describe('the coefficients of a link', () => {
  it('of a tube are pi a^4/(16 L R T), half the bore, the length, and a viscosity of its own or none', () => {
    const { coefficients, stride } = tableOf('tube');
    expect(stride).toBe(4);
    close(coefficients[0], (Math.PI * 1e-12) / (16 * 0.03 * RT));
    expect([coefficients[1], coefficients[2], coefficients[3]]).toEqual([1e-3, 0.03, NaN]);
    close(coefficients[4]! / coefficients[0]!, 1 / 16);
    expect([coefficients[5], coefficients[7]]).toEqual([0.5e-3, 2e-5]);
  });

  it('of a film of fixed area are K_k A_c: of liquid and two monolayers, or the permeance given for every gas', () => {
    const { coefficients, stride, thickness, extent } = tableOf('film-area');
    expect(stride).toBe(2);
    for (const k of [0, 1] as const) {
      close(coefficients[k], ((D[k] * H[k]) / (1e-6 + (2 * D[k]) / 2e-3)) * 0.5e-6);
      close(coefficients[2 + k], 3e-8 * 2e-6);
    }
    expect([...thickness]).toEqual([1e-6, NaN]);
    expect([...extent]).toEqual([0.5e-6, 2e-6]);
  });

  it('of a film of shared area are K_k phi pi', () => {
    const { coefficients, thickness, extent } = tableOf('film-share');
    for (const k of [0, 1] as const) close(coefficients[k], ((D[k] * H[k]) / 3e-6) * 0.2 * Math.PI);
    expect([thickness[0], extent[0]]).toEqual([3e-6, 0.2]);
  });

  it('of a path between bubbles are D_k H_k and the distance, given or that of their places', () => {
    const { coefficients, stride, thickness } = tableOf('liquid-path');
    expect(stride).toBe(3);
    for (const k of [0, 1] as const) close(coefficients[k], D[k] * H[k]);
    close(coefficients[2], 13e-3); // 3, 4 and 12
    expect(coefficients[5]).toBe(5e-3);
    expect(thickness).toHaveLength(0);
  });

  it('of a path to a pool are D_k H_k and whether the start-up term is wanted', () => {
    const { coefficients } = tableOf('pool-path');
    for (const k of [0, 1] as const) close(coefficients[k], D[k] * H[k]);
    expect([coefficients[2], coefficients[5]]).toEqual([0, 1]);
  });
});

describe('the permeance of a film', () => {
  const exponent = (min: number, max: number): fc.Arbitrary<number> =>
    fc.double({ min, max, noNaN: true }).map((x) => 10 ** x);

  it('is that of liquid and two monolayers in series (Princen & Mason 1965)', () => {
    fc.assert(
      fc.property(exponent(-11, -8), exponent(-7, -3), exponent(-9, -4), exponent(-6, 0), (d, s, h, k) => {
        // Resistances of a gas: h/(D H) of the liquid, 1/(H k) of each monolayer.
        const series = 1 / (1 / (s * k) + h / (d * s) + 1 / (s * k));
        close(filmPermeance(d, s, h, k), series);
        close(filmPermeance(d, s, h, Infinity), (d * s) / h);
        expect(filmPermeance(d, s, h, k)).toBeLessThan(filmPermeance(d, s, h, Infinity));
      }),
      { seed: 1, numRuns: 200 },
    );
  });
});
