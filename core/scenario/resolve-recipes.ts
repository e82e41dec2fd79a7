/**
 * Film recipes by name: those of the file, filled in from the built-in ones, checked against the laws of core/films.
 */
import { loadingFault } from '../films/loading.ts';
import { formatQuantity } from '../quantities/format.ts';
import { RECIPE_TEMPERATURE, RECIPES, type RecipeSubstance } from '../substances/recipes.ts';
import { WATER_TENSION_RANGE, waterSurfaceTension } from '../substances/water.ts';
import type { FaultList } from './fault-list.ts';
import { pathTo } from './path.ts';
import { isGiven, readRecord, type Reading } from './reading.ts';
import { recipeDocument, type RecipeDocument } from './recipe-document.ts';
import { FAR_FROM_TABLE, readNamed } from './resolve-gases.ts';
import type { Recipe, Supply, Tension } from './schema.ts';

export type RecipeReadings = ReadonlyMap<string, Reading<RecipeDocument>>;

export function readRecipes(value: unknown, list: FaultList): RecipeReadings {
  return readNamed('recipes', 'recipes', value, list, (entry, path) =>
    readRecord('a recipe', recipeDocument, entry, path, list),
  );
}

/** The recipes a file may name: its own first, then the built-in ones. */
export function knownRecipes(defined: RecipeReadings): readonly string[] {
  return [...new Set([...defined.keys(), ...RECIPES.keys()])];
}

function builtInFields(substance: RecipeSubstance): RecipeDocument {
  return recipeDocument.parse(substance);
}

/**
 * A recipe ready for core/films; null where a fault prevents it.
 * @param reading what the file defines under that name, undefined where it only names a built-in recipe
 * @param temperature K; null where the file's own is at fault
 */
export function resolveRecipe(
  name: string,
  reading: Reading<RecipeDocument> | undefined,
  temperature: number | null,
  list: FaultList,
): Recipe | null {
  const path = reading?.path ?? pathTo('recipes', name);
  const substance = RECIPES.get(name);
  const builtIn: Partial<RecipeDocument> = substance === undefined ? {} : builtInFields(substance);
  const own = reading?.fields ?? {};
  const isMissing = (key: keyof RecipeDocument): boolean => reading === undefined || !isGiven(reading, key);
  const field = <Key extends keyof RecipeDocument>(key: Key): RecipeDocument[Key] | undefined =>
    isMissing(key) ? builtIn[key] : own[key];

  refuseWhatIsNotComputed(own, path, list);
  const supply = resolveSupply(own, field('supply'), path, list);
  let micelles = field('micelles');
  if (supply?.kind === 'none' && micelles !== undefined) {
    if (!isMissing('micelles')) {
      const message =
        'a film without supply has no liquid for micelles; leave micelles out or give a supply of kind "closed-film"';
      list.error(pathTo(path, 'micelles'), 'contradiction', message);
    }
    micelles = undefined;
  }
  if (isMissing('tension') && builtIn.tension === undefined) {
    list.error(pathTo(path, 'tension'), 'missing', 'missing; a tension with its law is needed', {
      expected: 'a tension',
    });
  }
  const written = field('tension');
  const tension = written === undefined ? null : resolveTension(written, path, temperature, list);
  // A pure liquid takes nothing from a built-in recipe but its tension.
  const pure = tension?.law === 'constant';
  const loading = pure && isMissing('loading') ? undefined : field('loading');
  if (tension === null || supply === null || temperature === null) return null;
  if (loading === undefined && !isMissing('loading')) return null;

  const recipe: Recipe = {
    tension,
    loading: loading ?? null,
    supply,
    micelles: micelles === undefined || (pure && isMissing('micelles')) ? null : { cmc: micelles.cmc },
    source: own.source ?? sourceOf(substance, own),
  };
  const fault = loadingFault(recipe, temperature);
  if (fault !== null) {
    const [, key = '', sentence = fault] = /^([\w.]+): (.*)$/s.exec(fault) ?? [];
    list.error(key === '' ? path : `${path}.${key}`, 'recipe', sentence);
    return null;
  }
  const outside = substance !== undefined && isMissing('tension') && tension.law !== 'constant';
  if (outside && Math.abs(temperature - RECIPE_TEMPERATURE) > FAR_FROM_TABLE) {
    const message = `constants built in for 25 °C are used at ${formatQuantity(temperature, 'temperature')}; give a tension for that temperature`;
    list.warn(path, 'temperature', message);
  }
  return recipe;
}

function sourceOf(substance: RecipeSubstance | undefined, own: Partial<RecipeDocument>): string | null {
  if (substance === undefined || own.tension !== undefined) return null;
  return substance.source;
}

function resolveSupply(
  own: Partial<RecipeDocument>,
  written: RecipeDocument['supply'],
  path: string,
  list: FaultList,
): Supply | null {
  if (written === undefined) return { kind: 'none' };
  switch (written.kind) {
    case 'none':
      return { kind: 'none' };
    case 'closed-film':
      if (written.transport === 'equilibrium' && written.diffusivity !== undefined && own.supply !== undefined) {
        const message = 'not used with transport "equilibrium"; leave it out';
        list.warn(`${path}.supply.diffusivity`, 'not-used', message, { actual: written.diffusivity });
      }
      return written.transport === 'equilibrium'
        ? { kind: 'closed-film', thickness: written.thickness, transport: 'equilibrium' }
        : null;
    case 'bulk':
      return null;
  }
}

/** What the contract knows and this version does not compute is refused, never replaced by something near. */
function refuseWhatIsNotComputed(own: Partial<RecipeDocument>, path: string, list: FaultList): void {
  const refuse = (key: string, what: string, remedy: string): void =>
    list.error(`${path}.${key}`, 'not-yet', `${what} not computed by this version yet; ${remedy}`);
  if (own.supply?.kind === 'bulk') {
    refuse('supply.kind', 'a supply from the bulk is', 'use "closed-film" or "none"');
  } else if (own.supply?.kind === 'closed-film' && own.supply.transport === 'diffusing') {
    refuse('supply.transport', 'diffusion across the film is', 'use "equilibrium"');
  }
  if (own.micelles?.relaxation !== undefined) {
    refuse('micelles.relaxation', 'micelles that take time are', 'leave relaxation out: micelles then follow at once');
  }
  if (own.collapse !== undefined) refuse('collapse', 'collapse of the film is', 'leave collapse out');
}

function resolveTension(
  written: NonNullable<RecipeDocument['tension']>,
  path: string,
  temperature: number | null,
  list: FaultList,
): Tension | null {
  const clean = written.clean ?? waterTension(path, temperature, list);
  if (clean === null) return null;
  if (written.law === 'constant') return { law: 'constant', clean };
  const { saturation, szyszkowski } = written;
  const shared = {
    clean,
    saturation,
    ...(szyszkowski === undefined ? {} : { szyszkowski }),
    ions: written.ions === 2 ? 2 : 1,
  } as const;
  return written.law === 'frumkin'
    ? { law: 'frumkin', ...shared, attraction: written.attraction }
    : { law: written.law, ...shared };
}

function waterTension(path: string, temperature: number | null, list: FaultList): number | null {
  if (temperature === null) return null;
  if (temperature >= WATER_TENSION_RANGE.from && temperature < WATER_TENSION_RANGE.below) {
    return waterSurfaceTension(temperature);
  }
  const at = formatQuantity(temperature, 'temperature');
  list.error(
    `${path}.tension.clean`,
    'missing',
    `missing; water has no known surface tension at ${at}, so a surface tension is needed`,
  );
  return null;
}
