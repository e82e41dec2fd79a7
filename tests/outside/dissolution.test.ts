/** One bubble that dissolves, and one that shrinks through its own film. */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../run-scenario.ts';

const RT = 8.314462618 * 298.15;
const AMBIENT = 101325;

describe('a bubble of air in saturated water', () => {
  // The ratio d = R T H of dissolved to gaseous density is 0.02 for air, as Epstein & Plesset took it.
  const D = 2e-9;
  const H = 0.02 / RT;
  const gamma = 0.072;
  const radius = 10e-6;
  const vanish = 1e-6;
  const { events } = carryThrough({
    gases: { air: { molarMass: '28.96 g/mol', viscosity: '18.5 uPa*s', diffusivity: D, solubility: H } },
    recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
    nodes: [
      { id: 'A', kind: 'bubble', radius, recipe: 'bare', gas: { air: 1 } },
      { id: 'W', kind: 'pool', volume: '1 m^3', saturation: 1 },
    ],
    links: [{ id: 'l', kind: 'liquid', from: 'A', to: 'W' }],
    run: { until: '20 s', frames: 1, vanishRadius: vanish },
  });
  const gone = events.find((event) => event.event === 'bubble-vanished')!;

  it('of 10 um is gone in about 6.6 s', () => {
    // Epstein & Plesset, J. Chem. Phys. 18 (1950) 1505, Table II: 6.63 s for 10 um at f = 1, from memory. They left the gas that
    // the Laplace pressure compresses out of dR/dt at one place, a few per cent.
    expect(Math.abs(gone.time / 6.63 - 1)).toBeLessThan(0.03);
  });

  it('is gone when the quasi-steady law says', () => {
    // 4 pi R D H 2 gamma/R = -dn/dt with n = (P + 2 gamma/R) 4/3 pi R^3/(R T):
    // t = [P R^3/3 + 2 gamma R^2/3]/(2 gamma D R T H), from R to the vanishing radius.
    const age = (R: number): number => ((AMBIENT * R ** 3) / 3 + (2 * gamma * R * R) / 3) / (2 * gamma * D * RT * H);
    // Ten run tolerances.
    expect(Math.abs(gone.time / (age(radius) - age(vanish)) - 1)).toBeLessThan(1e-5);
  });
});

// De Vries 1958; Princen & Mason 1965: the film's area goes with R^2, the pressure difference with 1/R, the volume with R^3.
describe('a bubble that shrinks through its own film into the atmosphere', () => {
  const { frames } = carryThrough({
    gases: { air: { molarMass: '28.96 g/mol', viscosity: '18.5 uPa*s', diffusivity: 2e-9, solubility: 8e-6 } },
    recipes: { soap: { tension: { law: 'constant', clean: '30 mN/m' } } },
    nodes: [
      { id: 'A', kind: 'bubble', radius: '2 mm', faces: 1, recipe: 'soap', gas: { air: 1 } },
      { id: 'S', kind: 'reservoir', pressure: AMBIENT },
    ],
    links: [{ id: 'f', kind: 'film', from: 'A', to: 'S', area: { share: 0.5 }, thickness: '1 um' }],
    run: { until: 90_000, frames: 6, tolerance: 1e-8 },
  });

  it('loses equal parts of R^2 in equal times', () => {
    const areas = frames.map(({ radius }) => radius.A! ** 2);
    const losses = areas.slice(1).map((area, i) => areas[i]! - area);
    expect(losses[0]!).toBeGreaterThan(0.02 * areas[0]!);
    // The gas that 2 gamma/R = 30 Pa compresses is 3e-4 of it, and the whole of the departure.
    for (const loss of losses) expect(Math.abs(loss / losses[0]! - 1)).toBeLessThan(1e-4);
  });

  it('loses them at the rate of the film: phi K 2 gamma R T/p', () => {
    // dn/dt = -K phi pi R^2 2 gamma/R, n = p 4/3 pi R^3/(R T): d(R^2)/dt = -K phi gamma R T/p.
    const K = (2e-9 * 8e-6) / 1e-6;
    const expected = (K * 0.5 * 0.03 * RT) / AMBIENT;
    const measured = (frames[0]!.radius.A! ** 2 - frames.at(-1)!.radius.A! ** 2) / 90_000;
    // As above: 2 gamma/R against p.
    expect(Math.abs(measured / expected - 1)).toBeLessThan(1e-3);
  });
});
