/** Scenario files for the tests of this room, as plain JSON that a test may spoil. */
import { checkScenario } from '../../../core/scenario/load.ts';
import type { Fault } from '../../../core/scenario/fault.ts';
import type { Scenario } from '../../../core/scenario/schema.ts';

// A file that a test spoils has no type.
// eslint-disable-next-line @typescript-eslint/no-explicit-any
export type Spoilable = any;

/** Two mounted bubbles on a manifold that a pump drives, one of them in contact with a pool through a film. */
export function manifold(): Spoilable {
  return {
    format: 'frothwright',
    version: 1,
    title: 'Two bubbles on a manifold',
    temperature: '25 degC',
    gases: {
      air: {},
      tracer: {
        molarMass: '138 g/mol',
        viscosity: '14 uPa*s',
        diffusivity: '1e-9 m^2/s',
        solubility: '5e-7 mol/m^3/Pa',
      },
    },
    recipes: {
      soap: {
        tension: {
          law: 'frumkin',
          clean: '72 mN/m',
          saturation: '5 umol/m^2',
          szyszkowski: '0.05 mol/m^3',
          attraction: 0.5,
        },
        loading: { coverage: 0.8 },
        supply: { kind: 'closed-film', thickness: '1 um' },
      },
    },
    nodes: [
      {
        id: 'A',
        kind: 'bubble',
        radius: '5 mm',
        faces: 2,
        mouth: '2 mm',
        recipe: 'soap',
        gas: { air: 0.9, tracer: 0.1 },
        at: ['0 mm', '0 mm'],
      },
      {
        id: 'B',
        kind: 'bubble',
        diameter: '10 mm',
        faces: 2,
        mouth: '2 mm',
        recipe: 'soap',
        gas: { air: 1 },
        at: ['0 mm', '2 cm', '1 cm'],
      },
      { id: 'M', kind: 'cavity', volume: '2 mL', pressure: '101350 Pa', gas: { air: 1 } },
      {
        id: 'S',
        kind: 'reservoir',
        pressure: { wave: 'sine', mean: '101350 Pa', amplitude: '5 Pa', period: '2 s' },
        gas: { air: 1 },
      },
      { id: 'W', kind: 'pool', volume: '1 L', gas: { air: 1 } },
    ],
    links: [
      { id: 'ta', kind: 'tube', from: 'A', to: 'M', bore: '2 mm', length: '20 mm', open: [['0 s', '10 s']] },
      { id: 'tb', kind: 'tube', from: 'B', to: 'M', bore: '2 mm', length: '20 mm' },
      { id: 'ts', kind: 'tube', from: 'S', to: 'M', bore: '1 mm', length: '50 mm' },
      { id: 'f', kind: 'film', from: 'A', to: 'W', area: '1 mm^2', thickness: '1 um' },
      { id: 'l', kind: 'liquid', from: 'A', to: 'B' },
    ],
    run: { until: '10 s' },
  };
}

/** One free bubble of air in water. */
export function singleBubble(): Spoilable {
  return {
    format: 'frothwright',
    version: 1,
    gases: { air: {} },
    nodes: [{ id: 'A', kind: 'bubble', radius: '1 mm' }],
    run: { until: '1 s' },
  };
}

/** The checked scenario of a file that is right. */
export function loaded(file: unknown): Scenario {
  const result = checkScenario(file);
  if (!result.ok) throw new Error(sentences(result.faults).join('\n'));
  return result.scenario;
}

/** The faults of a file as lines, `path: message`. */
export function faultsOf(file: unknown): readonly string[] {
  const result = checkScenario(file);
  return result.ok ? [] : sentences(result.faults);
}

/** The warnings of a file that is right. */
export function warningsOf(file: unknown): readonly string[] {
  const result = checkScenario(file);
  if (!result.ok) throw new Error(sentences(result.faults).join('\n'));
  return sentences(result.warnings);
}

function sentences(faults: readonly Fault[]): readonly string[] {
  return faults.map((fault) => `${fault.path}: ${fault.message}`);
}
