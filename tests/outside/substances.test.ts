/** Built-in substances against the literature. */
import { describe, expect, it } from 'vitest';
import { coverageAt } from '../../core/films/law.ts';
import { createLaw } from '../../core/films/loading.ts';
import { equilibriumPressure } from '../../core/films/two-phase.ts';
import { checkScenario } from '../../core/scenario/load.ts';
import type { Recipe } from '../../core/scenario/schema.ts';
import { GASES } from '../../core/substances/gases.ts';
import { waterSurfaceTension } from '../../core/substances/water.ts';

describe('the surface tension of water', () => {
  // IAPWS R1-76(2014), its table of values; given there to 0.01 mN/m, so half of that is the tolerance.
  it.each([
    [0, 75.65],
    [20, 72.74],
    [25, 71.97],
    [37, 70.08],
    [50, 67.94],
  ])('at %d degC is %d mN/m', (celsius, tension) => {
    const error = Math.abs(1e3 * waterSurfaceTension(celsius + 273.15) - tension);
    expect(error).toBeLessThanOrEqual(0.0051);
  });

  it('vanishes at the critical point, 647.096 K', () => {
    expect(waterSurfaceTension(647.096)).toBe(0);
  });
});

describe('a built-in gas at 25 degC', () => {
  // Handbook values, from memory; 1 % covers their spread and their rounding to three digits.
  it.each([
    ['air', 18.5],
    ['nitrogen', 17.8],
    ['carbon-dioxide', 14.9],
    ['helium', 19.9],
  ])('%s has a viscosity of %d uPa s', (name, viscosity) => {
    expect(Math.abs(1e6 * GASES.get(name)!.viscosity.value - viscosity) / viscosity).toBeLessThan(0.01);
  });

  // Sander, Atmos. Chem. Phys. 15 (2015) 4399 and 23 (2023) 10901, two digits.
  it.each([
    ['oxygen', 1.3e-5],
    ['nitrogen', 6.4e-6],
    ['carbon-dioxide', 3.3e-4],
    ['helium', 3.8e-6],
    ['argon', 1.4e-5],
    ['hydrogen', 7.7e-6],
    ['methane', 1.4e-5],
    ['sulfur-hexafluoride', 2.4e-6],
  ])('%s dissolves in water to %d mol/(m^3 Pa)', (name, solubility) => {
    expect(GASES.get(name)!.solubility.value).toBe(solubility);
  });

  // CRC Handbook of Chemistry and Physics, Diffusion of Gases in Water, 25 degC, 1e-9 m^2/s.
  it.each([
    ['oxygen', 2.42],
    ['nitrogen', 2.0],
    ['carbon-dioxide', 1.91],
    ['helium', 7.28],
    ['argon', 2.5],
    ['hydrogen', 5.11],
    ['methane', 1.84],
  ])('%s diffuses in water at %d e-9 m^2/s', (name, diffusivity) => {
    expect(GASES.get(name)!.diffusivity.value).toBe(Number(`${diffusivity}e-9`));
  });

  it('air dissolves as the mixture of its nitrogen and oxygen', () => {
    const mean = 0.79 * GASES.get('nitrogen')!.solubility.value + 0.21 * GASES.get('oxygen')!.solubility.value;
    // Two digits are kept.
    expect(Math.abs(GASES.get('air')!.solubility.value / mean - 1)).toBeLessThan(0.01);
  });
});

describe('a built-in surfactant at its critical micelle concentration', () => {
  function builtIn(name: string): Recipe {
    const result = checkScenario({
      format: 'frothwright',
      version: 1,
      gases: { air: {} },
      nodes: [{ id: 'A', kind: 'bubble', radius: '1 mm', recipe: name }],
      run: { until: '1 s' },
    });
    if (!result.ok) throw new Error(result.faults.map((fault) => fault.message).join('\n'));
    return result.scenario.recipes[name]!;
  }

  function atCmc(recipe: Recipe): { readonly tension: number; readonly adsorption: number } {
    const law = createLaw(recipe.tension, 298.15)!;
    const coverage = coverageAt(law, recipe.micelles!.cmc);
    return { tension: law.clean - equilibriumPressure(law, coverage), adsorption: coverage * law.saturation };
  }

  it('sodium dodecyl sulfate: 8.2 mmol/L, 38 to 40 mN/m', () => {
    // Handbook values, from memory.
    const recipe = builtIn('sodium-dodecyl-sulfate');
    expect(recipe.micelles).toEqual({ cmc: 8.2 });
    expect(atCmc(recipe).tension).toBeGreaterThan(0.038);
    expect(atCmc(recipe).tension).toBeLessThan(0.04);
    // About 0.5 nm^2 a molecule, 3.2 umol/m^2: from memory, 5 %.
    expect(Math.abs(atCmc(recipe).adsorption / 3.2e-6 - 1)).toBeLessThan(0.05);
  });

  it('an ethoxylated fatty alcohol, C12 with 8 groups: 0.1 mmol/L, 33 to 36 mN/m', () => {
    // From memory.
    const recipe = builtIn('dodecanol-ethoxylate-8');
    expect(recipe.micelles).toEqual({ cmc: 0.1 });
    expect(atCmc(recipe).tension).toBeGreaterThan(0.033);
    expect(atCmc(recipe).tension).toBeLessThan(0.036);
  });
});
