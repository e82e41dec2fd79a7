/**
 * The one entry to this room: from a recipe at a temperature to a film.
 */
import { createClosedFilm } from './closed-film.ts';
import { createConstantFilm } from './constant.ts';
import type { Film } from './film.ts';
import { createInsolubleFilm } from './insoluble.ts';
import { createLaw, liquidPerArea, loadingFault, loadPerArea } from './loading.ts';
import type { FilmRecipe } from './recipe.ts';

/**
 * The film of a recipe.
 * @param recipe in SI
 * @param temperature K
 * @throws an Error with the sentence of `loadingFault` where that is not null: ask it first where the recipe is a user's
 */
export function createFilm(recipe: FilmRecipe, temperature: number): Film {
  const fault = loadingFault(recipe, temperature);
  if (fault !== null) throw new Error(fault);
  const law = createLaw(recipe.tension, temperature);
  if (law === null || recipe.loading === null)
    return createConstantFilm(recipe.tension.clean, liquidPerArea(recipe.supply));
  const perArea = loadPerArea(law, recipe, recipe.loading);
  switch (recipe.supply.kind) {
    case 'none':
      return createInsolubleFilm(law, perArea.surfactant);
    case 'closed-film':
      return createClosedFilm(law, perArea, recipe.micelles?.cmc ?? null);
  }
}
