/**
 * What a scenario needs as a whole: which gases and recipes it names, and which properties of the gases its links ask for.
 */
import { GASES, type GasProperty } from '../substances/gases.ts';
import { RECIPES } from '../substances/recipes.ts';
import type { FaultList } from './fault-list.ts';
import { pathTo } from './path.ts';
import { knownGases, resolveGas, type GasReadings, type Species } from './resolve-gases.ts';
import type { LinkReading } from './resolve-links.ts';
import type { NodeReading } from './resolve-nodes.ts';
import { resolveRecipe, type RecipeReadings } from './resolve-recipes.ts';
import type { Gas, Recipe } from './schema.ts';

/** Every gas that the file defines or names, and those of them that some node holds or is fed. */
export function gatherGases(
  readings: GasReadings,
  nodes: readonly (NodeReading | null)[],
): { readonly gases: Readonly<Record<string, Gas>>; readonly species: Species } {
  const known = knownGases(readings);
  const named = new Set(readings.keys());
  const held = new Set<string>();
  const compositions = nodes.flatMap((node) => {
    if (node === null) return [];
    const feed = node.kind === 'reservoir' ? undefined : node.reading.fields.feed;
    return feed === undefined ? [node.reading.fields.gas] : [node.reading.fields.gas, feed.gas];
  });
  for (const [name, share] of compositions.flatMap((composition) => Object.entries(composition ?? {}))) {
    if (!readings.has(name) && !GASES.has(name)) continue;
    named.add(name);
    if (share > 0) held.add(name);
  }
  const only = named.size === 1 ? [...named][0]! : null;
  if (only !== null && compositions.includes(undefined)) held.add(only);
  const gases: Record<string, Gas> = {};
  for (const name of named) gases[name] = resolveGas(name, readings.get(name));
  const names = Object.keys(gases).filter((name) => held.has(name));
  return { gases, species: { names, known, only } };
}

/** Every recipe that the file defines or a bubble names; null where one of them has a fault. */
export function gatherRecipes(
  readings: RecipeReadings,
  nodes: readonly (NodeReading | null)[],
  temperature: number | null,
  list: FaultList,
): Readonly<Record<string, Recipe>> | null {
  const named = new Set(readings.keys());
  for (const node of nodes) {
    const recipe = node?.kind === 'bubble' ? node.reading.fields.recipe : undefined;
    if (recipe !== undefined && RECIPES.has(recipe)) named.add(recipe);
  }
  const recipes: Record<string, Recipe> = {};
  let complete = true;
  for (const name of named) {
    const recipe = resolveRecipe(name, readings.get(name), temperature, list);
    if (recipe === null) complete = false;
    else recipes[name] = recipe;
  }
  return complete ? recipes : null;
}

/** A gas of the file's own must bring what the links that it can pass need to know of it. */
export function requireProperties(
  gases: Readonly<Record<string, Gas>>,
  species: Species,
  nodes: readonly (NodeReading | null)[],
  links: readonly (LinkReading | null)[],
  list: FaultList,
): void {
  const needs = new Map<GasProperty, string>();
  const need = (property: GasProperty, by: string): void => {
    if (!needs.has(property)) needs.set(property, by);
  };
  for (const node of nodes) {
    if (node?.kind === 'pool') need('solubility', `pool ${node.reading.fields.id ?? 'without id'}`);
  }
  for (const link of links) {
    if (link === null) continue;
    const by = `link ${link.reading.fields.id ?? 'without id'} (${link.kind})`;
    switch (link.kind) {
      case 'tube':
        need('molarMass', by);
        if (link.reading.fields.viscosity === undefined) need('viscosity', by);
        break;
      case 'film':
        if (Object.hasOwn(link.reading.raw, 'permeance')) break;
        need('diffusivity', by);
        need('solubility', by);
        break;
      case 'liquid':
        need('diffusivity', by);
        need('solubility', by);
        break;
    }
  }
  for (const name of species.names) {
    for (const [property, by] of needs) {
      if (gases[name]![property] !== null) continue;
      list.error(pathTo(pathTo('gases', name), property), 'missing', `missing; needed by ${by}`);
    }
  }
}
