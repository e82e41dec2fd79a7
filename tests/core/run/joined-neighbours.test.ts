/** What a vanished bubble leaves behind where its neighbours are to be joined: which links, how wide, and that their pairs are told. */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../../run-scenario.ts';

const RT = 8.314462618 * 298.15;
const AMBIENT = 101325;
const gamma = 0.03;
const mu = 18.5e-6;
const gases = { air: { molarMass: '28.96 g/mol', viscosity: mu, diffusivity: 2e-9, solubility: 8e-6 } };
const recipes = {
  bare: { tension: { law: 'constant', clean: gamma } },
  soap: {
    tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '1 mol/m^3' },
    loading: { coverage: 0.5 },
    supply: { kind: 'none' },
  },
};
const bubble = (id: string, radius: string, recipe = 'bare'): object => ({ id, kind: 'bubble', radius, recipe });
const film = (id: string, from: string, to: string, thickness = '10 um'): object => ({ id, kind: 'film', from, to, area: { share: 0.3 }, thickness }); // prettier-ignore
const tube = (id: string, from: string, to: string, bore: number, length: number): object => ({ id, kind: 'tube', from, to, bore, length }); // prettier-ignore

const star = {
  gases,
  recipes,
  nodes: [bubble('x', '30 um'), bubble('p', '100 um'), bubble('q', '110 um', 'soap'), bubble('r', '120 um')],
  links: [film('xp', 'x', 'p'), film('xq', 'x', 'q', '30 um'), film('xr', 'x', 'r')],
  run: { until: '1 h', frames: 1, onVanish: 'join-neighbours' },
};

describe('the neighbours of a bubble that vanishes', () => {
  it('are joined each with each, by links named after the two that led to it', () => {
    const { frames } = carryThrough(star);
    expect(Object.keys(frames.at(-1)!.flow).sort()).toEqual(['xp+xq', 'xp+xr', 'xq+xr']);
  });

  it('are not joined where they are by such a link already, and only where that was asked for', () => {
    const linked = { ...star, links: [...star.links, film('pr', 'r', 'p')] };
    expect(Object.keys(carryThrough(linked).frames.at(-1)!.flow).sort()).toEqual(['pr', 'xp+xq', 'xq+xr']);
    const dropped = { ...linked, run: { ...star.run, onVanish: 'drop' } };
    expect(Object.keys(carryThrough(dropped).frames.at(-1)!.flow)).toEqual(['pr']);
  });

  it('are joined by films of the mean permeance', () => {
    const { frames } = carryThrough({ ...star, run: { ...star.run, tolerance: 1e-9 } });
    const { flow, pressure, radius } = frames.at(-1)!;
    const permeance = 0.5 * (1 / 10e-6 + 1 / 30e-6) * 2e-9 * 8e-6;
    const expected = permeance * 0.3 * Math.PI * radius.p! ** 2 * (pressure.p! - pressure.q!);
    // Pressures of 1e5 Pa are told to 1e-11 of themselves; they differ by some tens of Pa.
    expect(Math.abs(flow['xp+xq']! / expected - 1)).toBeLessThan(1e-6);
  });

  it('lose neither gas nor surfactant', () => {
    const { result } = carryThrough(star);
    expect(result.eventCounts['bubble-vanished']).toBe(1);
    expect(result.worstGasBalance).toBeLessThan(1e-12);
    expect(result.worstSurfactantBalance).toBeLessThan(1e-12);
  });

  it('make pairs that are told at that instant', () => {
    const { events } = carryThrough(star);
    const gone = events.find(({ event }) => event === 'bubble-vanished')!;
    const told = events.filter(({ event, time }) => event === 'pair-unstable' && time === gone.time);
    expect(told.map(({ link }) => link).sort()).toEqual(['xp+xq', 'xp+xr', 'xq+xr']);
  });

  it('make pairs that are told beside those of a manifold in the same file', () => {
    const { events } = carryThrough({
      ...star,
      nodes: [bubble('b0', '1 mm'), bubble('b1', '1 mm'), ...star.nodes, { id: 'M', kind: 'cavity', volume: '1 mL', pressure: AMBIENT + 60 }], // prettier-ignore
      links: [tube('t0', 'b0', 'M', 1e-3, 0.05), tube('t1', 'b1', 'M', 1e-3, 0.05), ...star.links],
    });
    const gone = events.find(({ event }) => event === 'bubble-vanished')!;
    const told = events.filter(({ event, time }) => event === 'pair-unstable' && time === gone.time);
    expect(told.map(({ link }) => link).sort()).toEqual(['xp+xq', 'xp+xr', 'xq+xr']);
  });
});

describe('two tubes that met in a bubble that vanishes', () => {
  it('are one, of the resistance of both', () => {
    const tubes = [tube('a', 'x', 'p', 0.2e-3, 0.05), tube('b', 'x', 'q', 0.1e-3, 0.02)];
    const { frames } = carryThrough({
      gases,
      recipes,
      nodes: [bubble('x', '0.3 mm'), bubble('p', '1 mm'), bubble('q', '1.1 mm')],
      links: tubes,
      run: { until: '2 s', frames: 20, onVanish: 'join-neighbours', vanishRadius: '20 um', tolerance: 1e-9 },
    });
    const { flow, pressure } = frames.at(-1)!;
    // Hagen-Poiseuille: the differences of p^2 over tubes in series add up.
    const resistance = (bore: number, length: number): number => (16 * mu * length * RT) / (Math.PI * (bore / 2) ** 4);
    const whole = resistance(0.2e-3, 0.05) + resistance(0.1e-3, 0.02);
    const expected = (pressure.p! ** 2 - pressure.q! ** 2) / whole;
    expect(Math.abs(flow['a+b']! / expected - 1)).toBeLessThan(1e-6);
  });
});
