/** What makes a film recipe impossible, and that a sound one is loaded as asked. */
import { describe, expect, it } from 'vitest';
import { createFilm } from '../../../core/films/create.ts';
import { coverageAt } from '../../../core/films/law.ts';
import { loadingFault } from '../../../core/films/loading.ts';
import type { FilmRecipe } from '../../../core/films/recipe.ts';
import { family, lawOf, ROOM, stateOf, tensionOf } from './samples.ts';

const sound: FilmRecipe = {
  tension: tensionOf('langmuir'),
  loading: { coverage: 0.9 },
  supply: { kind: 'closed-film', thickness: 1e-6 },
  micelles: { cmc: 8.2 },
};

describe('a recipe', () => {
  it('that is sound has no fault', () => {
    expect(loadingFault(sound, ROOM)).toBeNull();
    for (const [, tension] of family) {
      expect(loadingFault({ ...sound, tension, loading: { coverage: 0.5 } }, ROOM)).toBeNull();
    }
  });

  it('loaded by coverage and one loaded by the concentration beside it are the same film', () => {
    const law = lawOf('langmuir');
    const byCoverage = createFilm(sound, ROOM).load(1e-4);
    const byConcentration = createFilm({ ...sound, loading: { concentration: law.concentration(0.9) } }, ROOM).load(
      1e-4,
    );
    expect(byConcentration.surfactant / byCoverage.surfactant).toBeCloseTo(1, 13);
  });

  it('whose coverage is exactly what the cmc allows is sound, and sits at the edge of its micelles', () => {
    const most = coverageAt(lawOf('langmuir'), 0.2);
    const recipe: FilmRecipe = { ...sound, loading: { coverage: most }, micelles: { cmc: 0.2 } };
    expect(loadingFault(recipe, ROOM)).toBeNull();
    const film = createFilm(recipe, ROOM);
    const { surfactant, liquid } = film.load(1e-4);
    expect(Math.abs(stateOf(film, surfactant, liquid, 1e-4).micelles)).toBeLessThan(1e-14);
  });

  it('may have any coverage below saturation on an insoluble face whatever its cmc: there is no liquid to hold micelles', () => {
    expect(loadingFault({ ...sound, supply: { kind: 'none' }, micelles: { cmc: 0.01 } }, ROOM)).toBeNull();
  });

  it('needs no Szyszkowski constant where no concentration is asked for', () => {
    const tension = { law: 'langmuir', clean: 0.072, saturation: 5e-6 } as const;
    const recipe: FilmRecipe = { tension, loading: { coverage: 0.9 }, supply: { kind: 'none' }, micelles: null };
    expect(loadingFault(recipe, ROOM)).toBeNull();
    const film = createFilm(recipe, ROOM);
    expect(stateOf(film, film.load(1e-4).surfactant, 0, 1e-4).tension).toBeGreaterThan(0.04);
  });

  const frumkin4 = tensionOf('frumkin', 4);
  const faults: readonly (readonly [string, FilmRecipe, RegExp])[] = [
    [
      'more coverage than the cmc allows',
      { ...sound, micelles: { cmc: 0.2 } },
      /^loading\.coverage: 0\.9; micelles\.cmc of 0\.2 .*at most 0\.8:/,
    ],
    [
      'two phases above a cmc that never reaches them',
      { ...sound, tension: frumkin4, loading: { coverage: 0.5 }, micelles: { cmc: 1e-4 } },
      /^loading\.coverage: 0\.5; micelles\.cmc/,
    ],
    ['coverage 1', { ...sound, loading: { coverage: 1 } }, /^loading\.coverage: 1; .*below 1/],
    ['negative coverage', { ...sound, loading: { coverage: -0.1 } }, /^loading\.coverage: -0\.1; .*at least 0/],
    [
      'a coverage that leaves no tension',
      { ...sound, loading: { coverage: 0.9999 }, micelles: null },
      /^loading\.coverage: 0\.9999; .*tension of -0\.0/,
    ],
    [
      'a concentration that leaves no tension',
      { ...sound, loading: { concentration: 1000 }, micelles: null },
      /^loading\.concentration: 1000 mol.*tension of -0\.0/,
    ],
    ['a negative concentration', { ...sound, loading: { concentration: -1 } }, /^loading\.concentration: -1/],
    ['no loading', { ...sound, loading: null }, /^loading: .*needs/],
    [
      'no saturation',
      { ...sound, tension: { law: 'langmuir', clean: 0.072, szyszkowski: 1 } },
      /^tension\.saturation: missing/,
    ],
    [
      'no Szyszkowski constant under a closed film',
      { ...sound, tension: { law: 'volmer', clean: 0.072, saturation: 5e-6 } },
      /^tension\.szyszkowski: missing/,
    ],
    [
      'an attraction that its law does not read',
      { ...sound, tension: tensionOf('volmer', 1) },
      /^tension\.attraction: 1; law volmer/,
    ],
    ['no ions', { ...sound, tension: tensionOf('langmuir', 0, 0) }, /^tension\.ions: 0/],
    ['no thickness', { ...sound, supply: { kind: 'closed-film', thickness: 0 } }, /^supply\.thickness: 0/],
    ['a cmc of nothing', { ...sound, micelles: { cmc: 0 } }, /^micelles\.cmc: 0/],
    ['a tension of nothing', { ...sound, tension: { ...sound.tension, clean: 0 } }, /^tension\.clean: 0/],
    ['a loaded pure liquid', { ...sound, tension: { law: 'constant', clean: 0.072 } }, /^loading: .*constant/],
    [
      'a pure liquid with micelles',
      { ...sound, loading: null, tension: { law: 'constant', clean: 0.072 } },
      /^micelles: .*constant/,
    ],
  ];

  it.each(faults)('with %s is refused in a sentence that names the key', (_, recipe, sentence) => {
    expect(loadingFault(recipe, ROOM)).toMatch(sentence);
    expect(() => createFilm(recipe, ROOM)).toThrow(sentence);
  });

  it('at no temperature is refused', () => {
    expect(loadingFault(sound, 0)).toMatch(/^temperature/);
  });
});
