/** What every built-in substance must bring. Its numbers stand against the literature in tests/outside. */
import { describe, expect, it } from 'vitest';
import { limitingElasticity } from '../../../core/films/law.ts';
import { createLaw } from '../../../core/films/loading.ts';
import { equilibriumPressure } from '../../../core/films/two-phase.ts';
import { checkScenario } from '../../../core/scenario/load.ts';
import { GAS_PROPERTIES, GASES } from '../../../core/substances/gases.ts';
import { RECIPES } from '../../../core/substances/recipes.ts';

function load(recipe: string, gas: string, temperature: string | number = 298.15) {
  return checkScenario({
    format: 'frothwright',
    version: 1,
    temperature,
    nodes: [{ id: 'A', kind: 'bubble', radius: '1 mm', recipe, gas: { [gas]: 1 } }],
    run: { until: '1 s' },
  });
}

describe('a built-in gas', () => {
  it.each([...GASES.keys()])('%s has a source for each of its values', (name) => {
    for (const property of GAS_PROPERTIES) {
      expect(GASES.get(name)![property].value).toBeGreaterThan(0);
      expect(GASES.get(name)![property].source.length).toBeGreaterThan(10);
    }
  });

  it.each([...GASES.keys()])('%s can be named without being defined', (name) => {
    const result = load('water', name);
    expect(result.ok && result.scenario.gases[name]?.molarMass).toBe(GASES.get(name)!.molarMass.value);
  });

  it('used far from 25 degC says so, and what to do', () => {
    const result = load('water', 'air', '60 degC');
    expect(result.ok && result.warnings.map((fault) => `${fault.path}: ${fault.message}`)).toEqual([
      'gases.air: viscosity, diffusivity, solubility built in for 25 °C are used at 60 °C; give them for that temperature',
    ]);
  });
});

describe('a built-in recipe', () => {
  it.each([...RECIPES.keys()])('%s can be named without being defined, and carries its source', (name) => {
    const result = load(name, 'air');
    expect(result.ok && result.scenario.recipes[name]?.source).toBe(RECIPES.get(name)!.source);
  });

  it('of a surfactant, used far from 25 degC, says so', () => {
    const result = load('sodium-dodecyl-sulfate', 'air', '45 degC');
    const paths = result.ok ? result.warnings.map((fault) => fault.path) : [];
    expect(paths).toContain('recipes.sodium-dodecyl-sulfate');
  });

  it('protein-layer has the tension and the elasticity that its source claims', () => {
    const result = load('protein-layer', 'air');
    const law = createLaw((result.ok && result.scenario.recipes['protein-layer']!.tension) as never, 298.15)!;
    // Its source says "near": 2 %.
    expect(Math.abs((law.clean - equilibriumPressure(law, 0.83)) / 0.05 - 1)).toBeLessThan(0.02);
    expect(Math.abs(limitingElasticity(law, 0.83) / 0.06 - 1)).toBeLessThan(0.02);
  });
});
