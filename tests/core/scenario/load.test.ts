/** What a scenario file comes to once it is loaded: SI, defaults, names resolved. */
/* eslint-disable @typescript-eslint/no-unsafe-member-access, @typescript-eslint/no-unsafe-assignment, @typescript-eslint/no-unsafe-call -- a file that a test spoils has no type */
import { describe, expect, it } from 'vitest';
import { loadScenario } from '../../../core/scenario/load.ts';
import { withRunSettings } from '../../../core/scenario/run-settings.ts';
import type { BubbleNode, FilmLink, LiquidLink } from '../../../core/scenario/schema.ts';
import { waterSurfaceTension } from '../../../core/substances/water.ts';
import { faultsOf, loaded, manifold, singleBubble, warningsOf } from './samples.ts';

function firstBubble(file: unknown): BubbleNode {
  const node = loaded(file).nodes[0]!;
  if (node.kind !== 'bubble') throw new Error('the first node is no bubble');
  return node;
}

describe('what a file leaves out', () => {
  it('is filled in: 25 degC, 1 atm, water, one face, 200 frames', () => {
    expect(loaded(singleBubble())).toMatchObject({
      title: '',
      notes: '',
      temperature: 298.15,
      ambient: { pressure: { wave: 'constant', value: 101325 }, liquidDensity: 997, surfaceHeight: null },
      species: ['air'],
      recipes: { water: { tension: { law: 'constant' }, loading: null, supply: { kind: 'none' }, micelles: null } },
      nodes: [
        {
          faces: 1,
          recipe: 'water',
          mouthRadius: null,
          at: null,
          hydrostatic: false,
          wall: null,
          feed: null,
          gas: [1],
        },
      ],
      links: [],
      run: {
        until: 1,
        untilBubbles: null,
        frames: 200,
        tolerance: 1e-6,
        method: 'auto',
        vanishRadius: 1e-6,
        onVanish: 'drop',
      },
      criteria: [],
    });
  });

  it('as clean tension is that of water at the temperature of the run', () => {
    const file = singleBubble();
    file.temperature = '37 degC';
    expect(loaded(file).recipes.water!.tension.clean).toBe(waterSurfaceTension(310.15));
  });

  it('of a waveform: phase 0 and half the period up', () => {
    const file = singleBubble();
    file.ambient = { pressure: { wave: 'square', mean: '1 bar', amplitude: '1 Pa', period: '2 s' } };
    expect(loaded(file).ambient.pressure).toEqual({
      wave: 'square',
      mean: 1e5,
      amplitude: 1,
      period: 2,
      phase: 0,
      duty: 0.5,
    });
  });

  it('as saturation of a pool is 1', () => {
    expect(loaded(manifold()).nodes[4]).toMatchObject({ kind: 'pool', saturation: 1, volume: 1e-3 });
  });
});

describe('a bubble', () => {
  it('given by its diameter is half as wide by radius', () => {
    expect(loaded(manifold()).nodes[1]).toMatchObject({ size: { kind: 'radius', value: 5e-3 } });
  });

  it('on a mouth of 2 mm stands on a radius of 1 mm', () => {
    expect(firstBubble(manifold()).mouthRadius).toBe(1e-3);
  });

  it('given by its height keeps it', () => {
    const file = manifold();
    delete file.nodes[0].radius;
    file.nodes[0].height = '0.4 mm';
    expect(firstBubble(file).size).toEqual({ kind: 'height', value: 0.4e-3 });
  });

  it('given by a height without a mouth is refused', () => {
    const file = singleBubble();
    file.nodes[0] = { id: 'A', kind: 'bubble', height: '1 mm' };
    expect(faultsOf(file)).toEqual([
      'nodes[0].height: a free bubble has no height; give its radius, or the mouth that it stands on',
    ]);
  });

  it('can be a hemisphere on its mouth', () => {
    const file = singleBubble();
    file.nodes[0].mouth = '2 mm';
    expect(firstBubble(file).size.value).toBe(1e-3);
  });

  it('placed by two numbers lies at [x, 0, z]', () => {
    const file = singleBubble();
    file.nodes[0].at = ['1 mm', '2 mm'];
    expect(firstBubble(file).at).toEqual([1e-3, 0, 2e-3]);
  });

  it('has a wall at rest at its own size, unless the file says another', () => {
    const file = singleBubble();
    file.nodes[0].wall = { stiffness: '300 Pa' };
    expect(firstBubble(file).wall).toEqual({ stiffness: 300, rest: { kind: 'radius', value: 1e-3 } });
    file.nodes[0].wall.restRadius = '0.9 mm';
    expect(firstBubble(file).wall).toEqual({ stiffness: 300, rest: { kind: 'radius', value: 0.9e-3 } });
  });

  it('is fed by a waveform of gas', () => {
    const file = singleBubble();
    file.nodes[0].feed = { rate: { wave: 'ramp', from: 0, to: '2 nmol/s', over: '5 s' } };
    expect(firstBubble(file).feed).toEqual({
      rate: { wave: 'ramp', from: 0, to: 2e-9, start: 0, over: 5 },
      gas: [1],
    });
  });
});

describe('the head of the liquid', () => {
  it('is carried by a bubble with one face and a place, where the file gives the surface', () => {
    const file = singleBubble();
    file.nodes[0].at = ['0 m', '-1 cm'];
    expect(firstBubble(file).hydrostatic).toBe(false);
    file.ambient = { surfaceHeight: 0 };
    expect(firstBubble(file).hydrostatic).toBe(true);
    file.nodes[0].faces = 2;
    expect(firstBubble(file).hydrostatic).toBe(false);
    delete file.nodes[0].at;
    file.nodes[0].faces = 1;
    expect(firstBubble(file).hydrostatic).toBe(false);
  });
});

describe('gases', () => {
  it('come in the order of the file, those that nobody holds left out', () => {
    const file = manifold();
    file.gases = { tracer: file.gases.tracer, helium: {}, air: {} };
    const scenario = loaded(file);
    expect(scenario.species).toEqual(['tracer', 'air']);
    expect(Object.keys(scenario.gases)).toEqual(['tracer', 'helium', 'air']);
    expect(scenario.nodes[0]!.gas).toEqual([0.1, 0.9]);
    expect(scenario.nodes[2]!.gas).toEqual([0, 1]);
  });

  it('of a composition are brought to a sum of 1, with a warning', () => {
    const file = manifold();
    file.nodes[0].gas = { air: 3, tracer: 1 };
    expect(loaded(file).nodes[0]!.gas).toEqual([0.75, 0.25]);
    expect(warningsOf(file)).toEqual(['nodes[0].gas: the shares add up to 4; they are divided by that sum']);
  });

  it('of a composition without any share are refused', () => {
    const file = manifold();
    file.nodes[0].gas = { air: 0 };
    expect(faultsOf(file)).toEqual([
      'nodes[0].gas: the shares do not add up to anything; at least one share above 0 is needed',
    ]);
  });

  it('need no naming where the file names one only', () => {
    const file = singleBubble();
    delete file.gases;
    file.nodes.push({ id: 'B', kind: 'bubble', radius: '1 mm', gas: { helium: 1 } });
    expect(loaded(file).species).toEqual(['helium']);
    expect(loaded(file).nodes[0]!.gas).toEqual([1]);
  });

  it('must be named where the file names several, or none', () => {
    const several = manifold();
    delete several.nodes[2].gas;
    const none = singleBubble();
    delete none.gases;
    const sentence = 'missing; shares of gases such as {"air": 1} are needed, as the file does not name one gas only';
    expect(faultsOf(several)).toEqual([`nodes[2].gas: ${sentence}`]);
    expect(faultsOf(none)).toEqual([`nodes[0].gas: ${sentence}`]);
  });

  it('of a built-in name take what the file leaves out from the built-in gas, with its source', () => {
    const file = singleBubble();
    file.gases.air = { viscosity: '20 uPa*s', source: 'our own measurement' };
    const { air } = loaded(file).gases;
    expect(air).toMatchObject({ viscosity: 20e-6, solubility: 7.8e-6 });
    expect(air!.source).toMatch(/^our own measurement; molarMass: /);
    expect(air!.source).not.toContain('viscosity:');
  });

  it('of their own may leave out what no link asks for', () => {
    const file = singleBubble();
    file.gases = { tracer: {} };
    expect(loaded(file).gases.tracer).toEqual({
      molarMass: null,
      viscosity: null,
      diffusivity: null,
      solubility: null,
      source: null,
    });
  });

  it('need no diffusivity for a film that gives its permeance', () => {
    const file = manifold();
    file.nodes.pop();
    file.nodes.push({ id: 'W', kind: 'reservoir', pressure: '1 atm', gas: { air: 1 } });
    file.links[3] = { id: 'f', kind: 'film', from: 'A', to: 'W', area: { share: 0.2 }, permeance: 1e-9 };
    file.links.pop();
    delete file.gases.tracer.diffusivity;
    delete file.gases.tracer.solubility;
    expect((loaded(file).links[3] as FilmLink).contact).toEqual({ kind: 'share', value: 0.2 });
  });
});

describe('recipes', () => {
  it('of a built-in name take what the file leaves out from the built-in recipe', () => {
    const file = singleBubble();
    file.nodes[0].recipe = 'sodium-dodecyl-sulfate';
    file.recipes = { 'sodium-dodecyl-sulfate': { loading: { concentration: '1 mmol/L' } } };
    expect(loaded(file).recipes['sodium-dodecyl-sulfate']).toMatchObject({
      tension: { law: 'langmuir', ions: 2 },
      loading: { concentration: 1 },
      micelles: { cmc: 8.2 },
    });
  });

  it('of a built-in name made insoluble lose their micelles', () => {
    const file = singleBubble();
    file.recipes = { 'sodium-dodecyl-sulfate': { supply: { kind: 'none' } } };
    expect(loaded(file).recipes['sodium-dodecyl-sulfate']!.micelles).toBeNull();
  });

  it('say where a diffusivity has no effect', () => {
    const file = manifold();
    file.recipes.soap.supply.diffusivity = '5e-10 m^2/s';
    expect(warningsOf(file)).toEqual([
      'recipes.soap.supply.diffusivity: not used with transport "equilibrium"; leave it out',
    ]);
  });

  it('of an insoluble film need no concentration', () => {
    const file = manifold();
    file.recipes.soap.supply = { kind: 'none' };
    delete file.recipes.soap.tension.szyszkowski;
    expect(loaded(file).recipes.soap!.tension).toEqual({
      law: 'frumkin',
      clean: 0.072,
      saturation: 5e-6,
      attraction: 0.5,
      ions: 1,
    });
  });
});

describe('a liquid path', () => {
  it('between bubbles is as long as their places say', () => {
    // (0, 0, 0) to (0, 20, 10) mm: sqrt(500) mm; one rounding of the root.
    expect((loaded(manifold()).links[4] as LiquidLink).distance).toBeCloseTo(Math.sqrt(500e-6), 15);
  });

  it('takes the distance that the file gives', () => {
    const file = manifold();
    file.links[4].distance = '3 cm';
    expect((loaded(file).links[4] as LiquidLink).distance).toBe(0.03);
  });

  it('to a pool has no distance and may start with a transient', () => {
    const file = manifold();
    file.links[4] = { id: 'l', kind: 'liquid', from: 'W', to: 'A', transient: true };
    expect(loaded(file).links[4]).toMatchObject({ distance: null, transient: true });
    file.links[4].distance = '3 cm';
    expect(faultsOf(file)).toEqual([
      'links[4].distance: not used to a pool, which is far away on all sides; leave it out',
    ]);
  });

  it('between bubbles has no transient', () => {
    const file = manifold();
    file.links[4].transient = true;
    expect(faultsOf(file)).toEqual(['links[4].transient: possible to a pool only; between two bubbles leave it out']);
  });

  it('is measured to the radius of curvature of a cap given by its height', () => {
    const file = manifold();
    delete file.nodes[0].radius;
    // (1 + 0.0625)/(2 * 0.25) mm = 2.125 mm, and 5 mm.
    file.nodes[0].height = '0.25 mm';
    file.links[4].distance = '7.1 mm';
    expect(faultsOf(file)[0]).toContain('the radii add up to 7.125 mm');
  });
});

describe('criteria', () => {
  it('are kept as the file gives them, with a warning that they are not judged', () => {
    const file = singleBubble();
    file.criteria = [{ measure: 'sauter-growth', below: 0.2, until: '2 h' }];
    expect(loaded(file).criteria).toEqual(file.criteria);
    expect(warningsOf(file)).toEqual([
      'criteria: criteria are not judged by this version yet; the run goes on without them',
    ]);
  });

  it('without a limit, or with an end that is no time, are refused', () => {
    const file = singleBubble();
    file.criteria = [{ measure: 'pair-margin' }, { measure: 'gas-lost', below: 1, until: '2 m' }];
    expect(faultsOf(file).slice(0, 2)).toEqual([
      'criteria[0]: sets no limit; "above" or "below" is needed',
      'criteria[1].until: "2 m" is a length; a time is needed',
    ]);
  });
});

describe('a file', () => {
  it('may begin with a byte order mark', () => {
    expect(loadScenario(`\uFEFF${JSON.stringify(singleBubble())}`).ok).toBe(true);
  });

  it('whose node has an unreadable kind is not blamed for the links to it as well', () => {
    const file = manifold();
    file.nodes[2].kind = 'cavty';
    expect(faultsOf(file)).toHaveLength(1);
  });

  it.each(['constructor', 'toString', '__proto__', 'hasOwnProperty'])('cannot be led astray by the name %s', (name) => {
    const file = JSON.parse(
      JSON.stringify(singleBubble()).replace(
        '"radius":"1 mm"',
        `"radius":"1 mm","recipe":"${name}","gas":{"${name}":1},"${name}":1`,
      ),
    );
    expect(faultsOf(file)).toHaveLength(3);
  });
});

describe('the command line', () => {
  it('can set another end and another number of frames', () => {
    const scenario = loaded(singleBubble());
    expect(withRunSettings(scenario, { until: 7 }).run).toEqual({ ...scenario.run, until: 7 });
    expect(withRunSettings(scenario, { frames: 3 }).run).toEqual({ ...scenario.run, frames: 3 });
  });
});
