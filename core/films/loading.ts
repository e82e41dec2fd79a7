/**
 * How a recipe is loaded on a face: coverage or concentration into moles per area; and what makes a recipe impossible.
 * A contradiction is a sentence for whoever wrote the recipe, never a silent clamp.
 */
import type { LoadPerArea } from './closed-film.ts';
import { coverageAt, type TensionLaw } from './law.ts';
import type { FilmRecipe, Loading, Supply, TensionRecipe } from './recipe.ts';
import { tensionLaws, type LawEntry } from './register.ts';
import { equilibriumConcentration, equilibriumPressure } from './two-phase.ts';

/**
 * The law of a recipe at a temperature, K; null for a pure liquid.
 * The recipe must be free of faults (`loadingFault`), or the law answers NaN.
 */
export function createLaw(tension: TensionRecipe, temperature: number): TensionLaw | null {
  if (tension.law === 'constant') return null;
  return tensionLaws[tension.law].create(
    {
      clean: tension.clean,
      saturation: tension.saturation ?? NaN,
      szyszkowski: tension.szyszkowski ?? NaN,
      attraction: tension.attraction ?? 0,
      ions: tension.ions ?? 1,
    },
    temperature,
  );
}

/** Film liquid of one face per area, m: half the thickness of a closed film, which has two faces. */
export function liquidPerArea(supply: Supply): number {
  return supply.kind === 'closed-film' ? 0.5 * supply.thickness : 0;
}

/** Coverage of a freshly loaded face. */
function loadedCoverage(law: TensionLaw, loading: Loading, cmc: number): number {
  if ('coverage' in loading) return loading.coverage;
  return coverageAt(law, Math.min(loading.concentration, cmc));
}

/** What one face is loaded with, per area: its adsorbed surfactant and what its share of the liquid holds, micelles included. */
export function loadPerArea(law: TensionLaw, recipe: FilmRecipe, loading: Loading): LoadPerArea {
  const coverage = loadedCoverage(law, loading, recipe.micelles?.cmc ?? Infinity);
  const adsorbed = coverage * law.saturation;
  const liquid = liquidPerArea(recipe.supply);
  if (liquid === 0) return { surfactant: adsorbed, liquid };
  const inLiquid = 'concentration' in loading ? loading.concentration : equilibriumConcentration(law, coverage);
  return { surfactant: adsorbed + liquid * inLiquid, liquid };
}

/**
 * What makes a recipe impossible or leaves part of it without effect, as one sentence that opens with the key at fault;
 * null when a film can be made of it.
 */
export function loadingFault(recipe: FilmRecipe, temperature: number): string | null {
  const { tension, loading, supply, micelles } = recipe;
  if (!isPositive(temperature)) return `temperature: ${temperature} K; a positive temperature is needed`;
  if (!isPositive(tension.clean)) return `tension.clean: ${tension.clean} N/m; a positive surface tension is needed`;
  if (supply.kind === 'closed-film' && !isPositive(supply.thickness)) {
    return `supply.thickness: ${supply.thickness} m; a positive film thickness is needed`;
  }
  if (micelles !== null && !isPositive(micelles.cmc)) {
    return `micelles.cmc: ${micelles.cmc} mol/m^3; a positive concentration is needed`;
  }
  if (tension.law === 'constant') {
    if (loading !== null)
      return 'loading: a film of constant tension holds no surfactant; leave loading out or choose another tension.law';
    if (micelles !== null)
      return 'micelles: a film of constant tension holds no surfactant; leave micelles out or choose another tension.law';
    return null;
  }
  if (loading === null) return `loading: a film of law ${tension.law} needs a coverage or a concentration`;
  return (
    parameterFault(tension, supply.kind === 'closed-film' || 'concentration' in loading) ??
    stateFault(recipe, loading, temperature)
  );
}

/** A number that the law needs and lacks, or has and cannot use. */
function parameterFault(tension: TensionRecipe, needsConcentration: boolean): string | null {
  const { law, saturation, szyszkowski, attraction = 0, ions = 1 } = tension;
  if (law === 'constant') return null;
  if (saturation === undefined || !isPositive(saturation)) {
    return `tension.saturation: ${saturation ?? 'missing'}; law ${law} needs a positive adsorption in mol/m^2`;
  }
  if (szyszkowski === undefined ? needsConcentration : !isPositive(szyszkowski)) {
    return `tension.szyszkowski: ${szyszkowski ?? 'missing'}; a film with a concentration needs a positive one in mol/m^3`;
  }
  const entry: LawEntry = tensionLaws[law];
  if (!Number.isFinite(attraction)) return `tension.attraction: ${attraction}; a finite number is needed`;
  if (attraction !== 0 && !entry.usesAttraction) {
    return `tension.attraction: ${attraction}; law ${law} has no attraction, frumkin has`;
  }
  if (!(ions >= 1 && ions < Infinity))
    return `tension.ions: ${ions}; 1, or 2 for an ionic surfactant without salt, is needed`;
  return null;
}

/** A loading that the law, the micelles or the clean tension do not allow. */
function stateFault(recipe: FilmRecipe, loading: Loading, temperature: number): string | null {
  const { tension, supply, micelles } = recipe;
  const law = createLaw(tension, temperature)!;
  const cmc = micelles?.cmc ?? Infinity;
  const coverage = loadedCoverage(law, loading, cmc);
  const where =
    'coverage' in loading
      ? `loading.coverage: ${loading.coverage}`
      : `loading.concentration: ${loading.concentration} mol/m^3`;
  if ('concentration' in loading && !(loading.concentration >= 0 && loading.concentration < Infinity)) {
    return `${where}; a finite concentration that is not negative is needed`;
  }
  if (!(coverage >= 0 && coverage < law.thetaMax)) {
    return `${where}; law ${tension.law} needs a coverage of at least 0${law.thetaMax === 1 ? ' and below 1' : ''}`;
  }
  const left = law.clean - equilibriumPressure(law, coverage);
  if (!(left > 0)) {
    return `${where}; the face would have a tension of ${format(left)} N/m there, which no face can have: load less`;
  }
  if ('coverage' in loading && supply.kind === 'closed-film' && equilibriumConcentration(law, coverage) > cmc) {
    const most = coverageAt(law, cmc);
    if (coverage > most) {
      return `${where}; micelles.cmc of ${cmc} mol/m^3 allows a coverage of at most ${format(most)}: load less, or load by concentration`;
    }
  }
  return null;
}

function isPositive(value: number): boolean {
  return value > 0 && value < Infinity;
}

function format(value: number): string {
  return String(Number(value.toPrecision(4)));
}
