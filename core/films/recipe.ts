/**
 * A film recipe in plain SI numbers: what a scenario's recipe comes to, and all that this room knows of scenarios.
 * `create.ts` makes a film of it, `loading.ts` says what in it contradicts itself.
 */
import type { TensionLawName } from './register.ts';

export interface TensionRecipe {
  readonly law: TensionLawName;
  /** Tension without surfactant, N/m. */
  readonly clean: number;
  /** Gamma_inf, mol/m^2; every law but `constant` needs it. */
  readonly saturation?: number | undefined;
  /** Szyszkowski's constant, mol/m^3; needed wherever a concentration is: a closed film, a loading by concentration. */
  readonly szyszkowski?: number | undefined;
  /** Frumkin's alpha; 0 when left out. */
  readonly attraction?: number | undefined;
  /** n of Gibbs' equation, 1 or 2; 1 when left out. */
  readonly ions?: number | undefined;
}

/** What a face is loaded with: its coverage, or the surfactant in the film liquid before micelles are told apart, mol/m^3. */
export type Loading = { readonly coverage: number } | { readonly concentration: number };

export type Supply =
  | { readonly kind: 'none' }
  /** `thickness` is that of the film, both faces together, at the area at which it is loaded, m. */
  | { readonly kind: 'closed-film'; readonly thickness: number };

export interface FilmRecipe {
  readonly tension: TensionRecipe;
  /** null for a pure liquid only. */
  readonly loading: Loading | null;
  readonly supply: Supply;
  /**
   * Critical micelle concentration, mol/m^3. With supply `none` there is no liquid for micelles: it then only caps the
   * monomer of a loading by concentration.
   */
  readonly micelles: { readonly cmc: number } | null;
}
