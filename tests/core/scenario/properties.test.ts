/** What holds for every file: loading never throws, saving and loading are inverse, spelling does not matter. */
/* eslint-disable @typescript-eslint/no-unsafe-member-access, @typescript-eslint/no-unsafe-assignment, @typescript-eslint/no-unsafe-argument -- a file that a test spoils has no type */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkScenario, loadScenario } from '../../../core/scenario/load.ts';
import { canonicalScenario, canonicalText, saveScenario } from '../../../core/scenario/save.ts';
import { manifold, loaded } from './samples.ts';
import { plainly, scenarioFiles, variously } from './random-scenarios.ts';

describe('saving and loading', () => {
  it('gives the scenario that was saved', () => {
    fc.assert(
      fc.property(scenarioFiles, (file) => {
        const scenario = loaded(file(plainly));
        const again = loadScenario(saveScenario(scenario));
        expect(again.ok && again.scenario).toEqual(scenario);
      }),
    );
  });

  it('twice gives the same bytes', () => {
    fc.assert(
      fc.property(scenarioFiles, (file) => {
        const once = saveScenario(loaded(file(plainly)));
        expect(saveScenario(loaded(JSON.parse(once)))).toBe(once);
      }),
    );
  });

  it('writes every default out, in SI', () => {
    const saved = canonicalScenario(loaded(manifold())) as Record<string, never>;
    expect(saved).toMatchObject({
      temperature: 298.15,
      ambient: { pressure: 101325, liquidDensity: 997 },
      recipes: { soap: { tension: { clean: 0.072, ions: 1 }, supply: { thickness: 1e-6, transport: 'equilibrium' } } },
      run: { frames: 200, tolerance: 1e-6, method: 'auto', vanishRadius: 1e-6, onVanish: 'drop' },
    });
  });

  it('ends the file with one line feed', () => {
    expect(saveScenario(loaded(manifold()))).toMatch(/[^\n]\n$/);
  });
});

describe('spelling', () => {
  it('in any unit gives the same scenario, to the last bit', () => {
    fc.assert(
      fc.property(scenarioFiles, fc.nat(), (file, seed) => {
        expect(loaded(file(variously(seed)))).toEqual(loaded(file(plainly)));
      }),
    );
  });

  it('and the order of keys leave the canonical text alone', () => {
    const file = manifold();
    const turned = Object.fromEntries(Object.entries(file).reverse());
    turned.run = { frames: 200, until: '10000 ms' };
    expect(canonicalText(loaded(turned))).toBe(canonicalText(loaded(file)));
  });

  it('of another value changes the canonical text', () => {
    const file = manifold();
    const before = canonicalText(loaded(file));
    file.nodes[0].radius = '5.000001 mm';
    expect(canonicalText(loaded(file))).not.toBe(before);
  });
});

/** Either a scenario, or at least one fault with a sentence: never an exception. */
function isAnswered(result: ReturnType<typeof loadScenario>): boolean {
  return result.ok || (result.faults.length > 0 && result.faults.every((fault) => fault.message.length > 0));
}

/** Every place in a JSON value, as the keys that lead to it. */
function places(value: unknown, path: readonly (string | number)[] = []): (readonly (string | number)[])[] {
  if (typeof value !== 'object' || value === null) return [path];
  return [path, ...Object.entries(value).flatMap(([key, inner]) => places(inner, [...path, key]))];
}

function replaced(value: unknown, path: readonly (string | number)[], by: unknown): unknown {
  const [key, ...rest] = path;
  if (key === undefined) return by;
  const copy = (Array.isArray(value) ? [...(value as unknown[])] : { ...(value as object) }) as Record<string, unknown>;
  copy[key] = replaced(copy[key], rest, by);
  return copy;
}

const STRANGE = [
  null,
  true,
  0,
  -1,
  1e308,
  -0,
  '',
  'NaN',
  '1e999999999 m',
  `${'9'.repeat(150)} in`,
  '5 mm',
  '5 ((((((((((m',
  '__proto__',
  [],
  {},
  [[]],
  { wave: 'sine' },
  { wave: null },
  { coverage: 2, concentration: [] },
] as const;

describe('loading never throws', () => {
  it('on any text', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), (text) => isAnswered(loadScenario(text))));
  });

  it('on any JSON', () => {
    fc.assert(fc.property(fc.json(), (text) => isAnswered(loadScenario(text))));
  });

  it('on any JSON value', () => {
    fc.assert(fc.property(fc.jsonValue(), (value) => isAnswered(checkScenario(value))));
  });

  it('on a scenario with anything anywhere', () => {
    const file: unknown = manifold();
    const anywhere = fc.constantFrom(...places(file));
    const anything = fc.oneof(fc.constantFrom<unknown>(...STRANGE), fc.jsonValue());
    fc.assert(
      fc.property(fc.array(fc.tuple(anywhere, anything), { minLength: 1, maxLength: 3 }), (changes) => {
        let spoilt = file;
        for (const [path, by] of changes) {
          try {
            spoilt = replaced(spoilt, path, by);
          } catch {
            // An earlier change took the place away.
          }
        }
        return isAnswered(checkScenario(spoilt));
      }),
      { numRuns: 1000 },
    );
  });

  it('on a scenario whose text is cut or garbled', () => {
    const text = JSON.stringify(manifold());
    fc.assert(
      fc.property(fc.nat(text.length), fc.nat(20), fc.string({ maxLength: 5 }), (at, length, by) =>
        isAnswered(loadScenario(text.slice(0, at) + by + text.slice(at + length))),
      ),
    );
  });

  it('on nesting a hundred thousand deep', () => {
    const deep = '['.repeat(100_000) + ']'.repeat(100_000);
    for (const section of ['vessel', 'nodes', 'links', 'gases', 'notes', 'criteria', 'temperature', 'run', 'odd']) {
      const text = JSON.stringify({ ...manifold(), [section]: 0 }).replace(`"${section}":0`, `"${section}":${deep}`);
      expect(isAnswered(loadScenario(text))).toBe(true);
    }
  });

  it('on a key named __proto__ anywhere', () => {
    const text = JSON.stringify(manifold());
    const braces = [...text.matchAll(/\{/g)].map((match) => match.index + 1);
    for (const at of braces) {
      const spoilt = loadScenario(`${text.slice(0, at)}"__proto__": {"a": 1}, ${text.slice(at)}`);
      expect(spoilt.ok).toBe(false);
    }
    expect(({} as Record<string, unknown>).a).toBeUndefined();
  });
});
