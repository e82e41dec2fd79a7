/** From a checked document to typed arrays: each kind of node with its parameters and the gas it starts with, and the faults. */
import { describe, expect, it } from 'vitest';
import { compileScenario } from '../../../core/network/compile.ts';
import { BUBBLE, CAVITY, OUTSIDE, POOL, RESERVOIR, stateSize } from '../../../core/network/network.ts';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { loadScenario } from '../../../core/scenario/load.ts';
import { sample, type DocumentParts } from '../transfer/sample-networks.ts';

const RT = GAS_CONSTANT * 298.15;
const SOFT = { tension: { law: 'constant', clean: 0.05 } };

/** The faults of a document that the loader lets pass. */
function faultsOf(parts: DocumentParts): readonly { readonly path: string; readonly message: string }[] {
  const loaded = loadScenario(JSON.stringify({ format: 'frothwright', version: 1, run: { until: 1 }, ...parts }));
  if (!loaded.ok) throw new Error(loaded.faults.map(({ path, message }) => `${path}: ${message}`).join('\n'));
  const compiled = compileScenario(loaded.scenario);
  return 'faults' in compiled ? compiled.faults : [];
}

const every = sample({
  ambient: { pressure: { wave: 'ramp', from: 100000, to: 110000, start: 1, over: 10 }, surfaceHeight: '1 m' },
  recipes: {
    soft: SOFT,
    unused: SOFT,
    soap: {
      tension: { law: 'langmuir', clean: 0.072, saturation: 4e-6, szyszkowski: 0.5 },
      loading: { coverage: 0.8 },
      supply: { kind: 'closed-film', thickness: '2 um' },
    },
  },
  nodes: [
    { id: 'supply', kind: 'reservoir', pressure: '1.2 bar', gas: { helium: 1, air: 3 } },
    { id: 'sump', kind: 'pool', volume: '2 L', saturation: 1.5, gas: { air: 4, helium: 1 } },
    { id: 'large', kind: 'bubble', diameter: '4 mm', recipe: 'soft', gas: { air: 1 }, at: ['1 m', '0 m'] },
    { id: 'fitting', kind: 'cavity', volume: '3 mL', pressure: '1.1 bar', gas: { helium: 3, air: 1 } },
    {
      id: 'blown',
      kind: 'bubble',
      height: '3 mm',
      mouth: '2 mm',
      faces: 2,
      recipe: 'soap',
      gas: { helium: 1 },
      wall: { stiffness: '300 Pa', restHeight: '2 mm' },
      feed: { rate: { wave: 'sine', mean: 2e-9, amplitude: 1e-9, period: 3 }, gas: { air: 1, helium: 1 } },
    },
    { id: 'small', kind: 'bubble', radius: '1 mm', recipe: 'soap', gas: { air: 1, helium: 1 } },
  ],
});

describe('the nodes of a network', () => {
  const { network, start } = every;
  const { nodes } = network;
  const species = 2;

  it('stand in the order bubbles, cavities, pools, reservoirs, and one for what is fed, and keep their names', () => {
    expect([...nodes.kind]).toEqual([BUBBLE, BUBBLE, BUBBLE, CAVITY, POOL, RESERVOIR, OUTSIDE]);
    expect([nodes.count, nodes.bubbleCount]).toEqual([7, 3]);
    expect(Array.from(nodes.origin, network.nodeName)).toEqual([
      'large',
      'blown',
      'small',
      'fitting',
      'sump',
      'supply',
      'outside',
    ]);
    expect([...nodes.origin]).toEqual([2, 4, 5, 3, 1, 0, -1]);
    expect(network.species).toEqual(['helium', 'air']); // as the file first names them
    expect(stateSize(network)).toBe(7 * species);
    expect([start.amounts.length, start.sizes.length]).toEqual([14, 7]);
  });

  it('of a free bubble give half its diameter, its head, and the gas p V/(R T) at the pressure of the start', () => {
    expect(start.sizes[0]).toBe(2e-3);
    expect(nodes.mouth[0]).toBe(0);
    expect(nodes.faces[0]).toBe(1);
    // The liquid is water unless the file says otherwise, 997 kg/m^3 (core/substances/water.ts), at standard gravity; 1 m of it.
    expect(nodes.head[0]! / (997 * 9.80665)).toBeCloseTo(1, 14);
    const p = 100000 + nodes.head[0]! + (2 * 0.05) / 2e-3;
    expect(start.amounts[1]! / ((p * (4 / 3) * Math.PI * 8e-9) / RT)).toBeCloseTo(1, 14);
    expect(start.amounts[0]).toBe(0);
  });

  it('of a mounted bubble give half its bore, its height, its wall and its film', () => {
    expect(nodes.mouth[1]).toBe(1e-3);
    expect(start.sizes[1]).toBe(3e-3);
    expect(nodes.faces[1]).toBe(2);
    expect(nodes.head[1]).toBe(0);
    expect(nodes.wallStiffness[1]).toBe(300);
    // pi h (3 a^2 + h^2)/6 at h = 2 a: 7/3 pi a^3.
    expect(nodes.wallVolume[1]! / ((7 / 3) * Math.PI * 1e-9)).toBeCloseTo(1, 14);
    // One face, pi (a^2 + h^2): the loaded coverage and what half of the film's 2 um holds at its equilibrium, c_s theta/(1 - theta).
    const area = Math.PI * 10e-6;
    expect(nodes.liquid[1]! / (area * 1e-6)).toBeCloseTo(1, 14);
    expect(nodes.surfactant[1]! / (area * (0.8 * 4e-6 + 1e-6 * 0.5 * 4))).toBeCloseTo(1, 13);
    const gamma = 0.072 + RT * 4e-6 * Math.log(0.2);
    const volume = (Math.PI * 3e-3 * (3e-6 + 9e-6)) / 6;
    const wall = 300 * (volume / ((7 / 3) * Math.PI * 1e-9) - 1);
    const p = 100000 + (4 * 2 * gamma * 3e-3) / 10e-6 + wall;
    expect(start.amounts[2]! / ((p * volume) / RT)).toBeCloseTo(1, 13);
  });

  it('share one film among the bubbles of a recipe, and make none for a recipe that no bubble has', () => {
    expect(network.films).toHaveLength(2);
    expect(nodes.film[1]).toBe(nodes.film[2]);
    expect(nodes.film[0]).not.toBe(nodes.film[1]);
    expect(network.films[nodes.film[0]!]!.cleanTension).toBe(0.05);
    expect(network.films[nodes.film[1]!]!.cleanTension).toBe(0.072);
    // Each is loaded for its own area: 4 pi R^2 against pi (a^2 + h^2).
    expect(nodes.surfactant[2]! / nodes.surfactant[1]!).toBeCloseTo((4 * 1) / 10, 14);
  });

  it('share the gas of a bubble in proportion', () => {
    expect(start.amounts[4]).toBe(start.amounts[5]);
  });

  it('of a cavity give its volume, and p V/(R T) of each gas', () => {
    expect(nodes.volume[3]).toBe(3e-6);
    expect(start.amounts[6]! / ((0.75 * 1.1e5 * 3e-6) / RT)).toBeCloseTo(1, 14);
    expect(start.amounts[7]! / ((0.25 * 1.1e5 * 3e-6) / RT)).toBeCloseTo(1, 14);
  });

  it('of a pool give H V_l of each gas, and what is dissolved at its saturation of the ambient pressure of the start', () => {
    // H of helium and air, core/substances/gases.ts.
    expect(nodes.capacity[8]! / (3.8e-6 * 2e-3)).toBeCloseTo(1, 14);
    expect(nodes.capacity[9]! / (7.8e-6 * 2e-3)).toBeCloseTo(1, 14);
    expect(start.amounts[8]! / (0.2 * 1.5 * 100000 * 3.8e-6 * 2e-3)).toBeCloseTo(1, 14);
    expect(start.amounts[9]! / (0.8 * 1.5 * 100000 * 7.8e-6 * 2e-3)).toBeCloseTo(1, 14);
    expect(nodes.volume[4]).toBe(Infinity);
  });

  it('of a reservoir give its pressure and mole fractions, and an account that is empty', () => {
    expect(nodes.drive[5]).toEqual({ wave: 'constant', value: 1.2e5 });
    expect(nodes.drive.filter((drive) => drive !== null)).toHaveLength(1);
    expect([nodes.fraction[10], nodes.fraction[11]]).toEqual([0.25, 0.75]);
    expect([...start.amounts.subarray(10)]).toEqual([0, 0, 0, 0]);
    expect(nodes.volume[5]).toBe(Infinity);
  });

  it('that are fed are listed with the rate and the shares of what comes in', () => {
    expect(network.feeds).toEqual([
      { node: 1, rate: { wave: 'sine', mean: 2e-9, amplitude: 1e-9, period: 3, phase: 0 }, fraction: [0.5, 0.5] },
    ]);
  });

  it('without a feed have no node outside', () => {
    const plain = sample({ nodes: [{ id: 'A', kind: 'bubble', radius: 1e-3, gas: { air: 1 } }] });
    expect([...plain.network.nodes.kind]).toEqual([BUBBLE]);
  });

  it('know the vessel and the properties of each gas by its name', () => {
    expect(network.ambient).toEqual({ wave: 'ramp', from: 100000, to: 110000, start: 1, over: 10 });
    expect(network.temperature).toBe(298.15);
    expect([...network.molarMass]).toEqual([4.0026e-3, 28.965e-3]);
    expect([...network.viscosity]).toEqual([19.8e-6, 18.4e-6]);
    expect([...network.diffusivity]).toEqual([7.28e-9, 2.1e-9]);
  });
});

describe('the pressure signal that a network has to resolve', () => {
  const signal = (parts: DocumentParts): number => sample(parts).start.pressureSignal;
  const soft = { recipes: { soft: SOFT } };
  const bubble = (id: string, radius: number, more: object = {}): unknown => ({
    id,
    kind: 'bubble',
    radius,
    recipe: 'soft',
    gas: { air: 1 },
    ...more,
  });

  it('is the mean capillary pressure of the bubbles', () => {
    // 100 Pa at 1 mm, 50 Pa at 2 mm and, with two faces, 100 Pa at 2 mm of curvature.
    const nodes = [bubble('A', 1e-3), bubble('B', 2e-3), bubble('C', 2e-3, { faces: 2, mouth: 1e-3 })];
    expect(signal({ ...soft, nodes })).toBeCloseTo(250 / 3, 12);
  });

  it('is the swing of what drives them where that is smaller', () => {
    const wave = { wave: 'sine', mean: 101325, amplitude: 2, period: 1 };
    expect(signal({ ...soft, ambient: { pressure: wave }, nodes: [bubble('A', 1e-3)] })).toBe(4);
    expect(
      signal({ ...soft, nodes: [bubble('A', 1e-3), { id: 'S', kind: 'reservoir', pressure: wave, gas: { air: 1 } }] }),
    ).toBe(4);
    const wide = { ...wave, amplitude: 200 };
    expect(signal({ ...soft, ambient: { pressure: wide }, nodes: [bubble('A', 1e-3)] })).toBeCloseTo(100, 12);
  });

  it('is not below a hundredth of a pascal, and 1 Pa where nothing tells', () => {
    const wave = { wave: 'sine', mean: 101325, amplitude: 1e-6, period: 1 };
    expect(signal({ ...soft, ambient: { pressure: wave }, nodes: [bubble('A', 1e-3)] })).toBe(0.01);
    expect(signal({ nodes: [{ id: 'C', kind: 'cavity', volume: 1e-6, pressure: 1e5, gas: { air: 1 } }] })).toBe(1);
  });
});

describe('a document that only the physics can fault', () => {
  // A wall of 2 MPa at an eighth of its volume at rest pulls 1.75 MPa below the vessel: the bubble would be torn open.
  const torn = (gas: unknown): DocumentParts => ({
    gases: { air: {}, helium: {} },
    nodes: [
      { id: 'C', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: { air: 1, helium: 1 } },
      { id: 'A', kind: 'bubble', radius: '1 mm', gas, wall: { stiffness: '2 MPa', restRadius: '2 mm' } },
    ],
  });

  it('says of a bubble that its wall pulls below zero pressure that it has no state to start from, by its path in the file', () => {
    const faults = faultsOf(torn({ air: 1, helium: 1 }));
    expect(faults.map(({ path }) => path)).toEqual(['nodes[1]']);
    expect(faults[0]!.message).toMatch(/below zero pressure/);
  });

  it('says so whichever of the gases the bubble holds', () => {
    expect(faultsOf(torn({ air: 1 })).map(({ path }) => path)).toEqual(['nodes[1]']);
    expect(faultsOf(torn({ helium: 1 })).map(({ path }) => path)).toEqual(['nodes[1]']);
  });

  it('says so of every such bubble at once, and of none that merely shrinks', () => {
    const nodes = [0.5, 1, 2].map((radius, i) => ({
      id: `b${i}`,
      kind: 'bubble',
      radius: `${radius} mm`,
      gas: { air: 1 },
      wall: { stiffness: '2 MPa', restRadius: '2 mm' },
    }));
    expect(faultsOf({ nodes }).map(({ path }) => path)).toEqual(['nodes[0]', 'nodes[1]']);
  });

  it('with a recipe that contradicts itself is told by the key in that recipe, all of them at once', () => {
    // The loader says this first; compiled from a scenario made by other hands, the network says it as well.
    const loaded = loadScenario(
      JSON.stringify({
        format: 'frothwright',
        version: 1,
        run: { until: 1 },
        recipes: { one: SOFT, two: SOFT },
        nodes: ['one', 'two'].map((recipe) => ({ id: recipe, kind: 'bubble', radius: 1e-3, recipe, gas: { air: 1 } })),
      }),
    );
    if (!loaded.ok) throw new Error('the document is whole');
    const { scenario } = loaded;
    const bad = { ...scenario.recipes.one!, loading: { coverage: 0.5 } };
    const compiled = compileScenario({ ...scenario, recipes: { one: bad, two: bad, unused: bad } });
    expect('faults' in compiled && compiled.faults.map(({ path }) => path)).toEqual([
      'recipes.one.loading',
      'recipes.two.loading',
    ]);
  });
});
