/** The experiment that everyone knows: two soap bubbles on one tube, and what the formulas of the trade say of it. */
import { describe, expect, it } from 'vitest';
import { carryThrough } from '../run-scenario.ts';

const AMBIENT = 101325;

describe('the overpressure of a bubble', () => {
  const at = (radius: string, faces: number, tension: string): number => {
    const { frames } = carryThrough({
      recipes: { bare: { tension: { law: 'constant', clean: tension } } },
      nodes: [{ id: 'A', kind: 'bubble', radius, faces, recipe: 'bare' }],
      links: [],
      run: { until: '1 s', frames: 1 },
    });
    return frames[0]!.pressure.A! - AMBIENT;
  };
  // Young and Laplace: 2 f gamma/R. A pressure of 1e5 Pa carries rounding of some 1e-10 Pa.
  it('is 144 Pa for one face of 72 mN/m at 1 mm', () => {
    expect(Math.abs(at('1 mm', 1, '72 mN/m') - 144)).toBeLessThan(1e-8);
  });
  it('is 10 Pa for a film of 25 mN/m at 10 mm', () => {
    expect(Math.abs(at('10 mm', 2, '25 mN/m') - 10)).toBeLessThan(1e-8);
  });
});

describe('two bubbles on tubes of equal bore, in pure liquid', () => {
  const gamma = 0.03;
  const mouth = 2e-3; // inner radius, m
  const { frames, events } = carryThrough({
    recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
    nodes: [
      { id: 'A', kind: 'bubble', radius: '5 mm', faces: 2, mouth: '4 mm', recipe: 'bare' },
      { id: 'B', kind: 'bubble', radius: '4.5 mm', faces: 2, mouth: '4 mm', recipe: 'bare' },
    ],
    links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore: '1 mm', length: '50 mm' }],
    run: { until: '100 s', frames: 4, tolerance: 1e-8 },
  });
  const end = frames.at(-1)!;

  it('end as one large bubble and a cap of the same radius of curvature', () => {
    // Common practice. At rest the pressures are equal, and so, with one tension, the radii.
    expect(Math.abs(end.radius.A! / end.radius.B! - 1)).toBeLessThan(1e-7);
    expect(events.filter((event) => event.event === 'mouth-passed').map((event) => event.subject)).toEqual(['B']);
  });

  it('end at the radius that the conserved gas gives', () => {
    // Independent: V(R) of the large and the small cap on a mouth, one pressure p = P + 4 gamma/R, bisected for p (V_1 + V_2) = n R T.
    const RT = 8.314462618 * 298.15;
    const cap = (h: number): number => (Math.PI * h * (3 * mouth * mouth + h * h)) / 6;
    const gas = (R: number): number => {
      const depth = Math.sqrt(R * R - mouth * mouth);
      return ((AMBIENT + (4 * gamma) / R) * (cap(R + depth) + cap(R - depth))) / RT;
    };
    const total = frames[0]!.amount.A! + frames[0]!.amount.B!;
    let [low, high] = [3e-3, 1e-2];
    for (let pass = 0; pass < 200; pass++) {
      const middle = 0.5 * (low + high);
      if (gas(middle) < total) low = middle;
      else high = middle;
    }
    // Ten run tolerances.
    expect(Math.abs(end.radius.A! / low - 1)).toBeLessThan(1e-7);
  });

  it('run apart, at first, at the pace of 4 mu L (R/a)^4/(gamma - E)', () => {
    // Linearised Poiseuille, common practice, for two equal thin-film bubbles: nearly equal free ones, a tube between.
    const mu = 18.5e-6;
    const [R, a, L] = [10e-3, 0.5e-3, 50e-3];
    const pace = (4 * mu * L * (R / a) ** 4) / gamma;
    const { frames: seen } = carryThrough({
      gases: { air: { molarMass: '28.96 g/mol', viscosity: mu, diffusivity: 2e-9, solubility: 8e-6 } },
      recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
      nodes: [
        { id: 'A', kind: 'bubble', radius: R * 1.00001, faces: 2, recipe: 'bare', gas: { air: 1 } },
        { id: 'B', kind: 'bubble', radius: R, faces: 2, recipe: 'bare', gas: { air: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore: 2 * a, length: L }],
      run: { until: 2 * pace, frames: 2, tolerance: 1e-10 },
    });
    const difference = seen.map(({ radius }) => radius.A! - radius.B!);
    const measured = (2 * pace) / Math.log(difference[2]! / difference[0]!);
    // The formula leaves out what 12 Pa compress of 101325 (1e-4) and the growth's own curvature (7e-5 by then).
    expect(Math.abs(measured / pace - 1)).toBeLessThan(1e-3);
  });
});

describe("Gibbs' criterion in a run", () => {
  // An insoluble Langmuir film: eps = RT Gamma_inf theta/(1-theta), gamma = gamma_0 + RT Gamma_inf ln(1-theta). A vessel whose
  // pressure falls lets two equal bubbles grow and their films thin out, until the pair passes eps = gamma/2.
  // For a film of two faces E = 2 eps, and the same coverage is where E = gamma.
  const RT = 8.314462618 * 298.15;
  const saturation = 5e-6;
  const clean = 0.072;
  const elasticity = (theta: number): number => (RT * saturation * theta) / (1 - theta);
  const tension = (theta: number): number => clean + RT * saturation * Math.log(1 - theta);
  const carried = (faces: number) =>
    carryThrough({
      ambient: { pressure: { wave: 'ramp', from: AMBIENT, to: '60 kPa', start: 0, over: '10 s' } },
      recipes: {
        film: {
          tension: { law: 'langmuir', clean, saturation, szyszkowski: '1 mol/m^3' },
          loading: { coverage: 0.86 },
          supply: { kind: 'none' },
        },
      },
      nodes: ['A', 'B'].map((id) => ({ id, kind: 'bubble', radius: '5 mm', faces, recipe: 'film' })),
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '1 mm^2', thickness: '10 um' }],
      run: { until: '10 s', frames: 1000, tolerance: 1e-8 },
    });

  for (const [what, faces, criterion] of [
    ['half of gamma, one face', 1, (theta: number) => elasticity(theta) - 0.5 * tension(theta)],
    ['gamma as E of the film, two faces', 2, (theta: number) => 2 * elasticity(theta) - tension(theta)],
  ] as const) {
    const { events, frames } = carried(faces);
    const turn = events.find((event) => event.event === 'pair-unstable')!;

    it(`turns the pair unstable at the instant where eps is ${what}`, () => {
      let [low, high] = [0.5, 0.86];
      for (let pass = 0; pass < 100; pass++) {
        const middle = 0.5 * (low + high);
        if (criterion(middle) < 0) low = middle;
        else high = middle;
      }
      // Gamma A is constant: theta = 0.86 (5 mm/R)^2. Radii between two frames by the straight line: a millionth off.
      const turned = 5e-3 * Math.sqrt(0.86 / low);
      const after = frames.findIndex(({ time }) => time > turn.time);
      const [one, two] = [frames[after - 1]!, frames[after]!];
      const share = (turn.time - one.time) / (two.time - one.time);
      const R = one.radius.A! + share * (two.radius.A! - one.radius.A!);
      expect(Math.abs(R / turned - 1)).toBeLessThan(1e-6);
    });

    it(`tells it once, ${faces === 1 ? 'one face' : 'two faces'}`, () => {
      expect(events.map((event) => event.event)).toEqual(['pair-unstable', 'run-ended']);
    });
  }
});
