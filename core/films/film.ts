/**
 * What a film is to the rest of the house: a thing that turns the area of one face into tension and elasticity.
 * A law of state (one file each) and a supply (one file each) make a film; the network only ever calls `evaluate`.
 */

/** Offsets into the array that `evaluate` fills. */
export const FILM = {
  /** Surface tension of one face, N/m. */
  tension: 0,
  /** d gamma / d ln A of one face on a slow change, N/m; 0 for a pinned or two-phase surface. */
  elasticity: 1,
  /** Gamma / Gamma_inf (NaN for a pure liquid; may pass 1 only for laws without saturation). */
  coverage: 2,
  /** Monomer concentration in the film liquid beside the face, mol/m^3 (0 without a bulk). */
  concentration: 3,
  /** Positive where two surface phases coexist, negative outside, continuous through zero at both ends; -1 where the law has none. */
  twoPhase: 4,
  /** Positive where the film liquid holds micelles, negative below, continuous through zero at the cmc; -1 where there are none. */
  micelles: 5,
} as const;

/** How many numbers `evaluate` writes. */
export const FILM_SIZE = 6;

/** What one face of a bubble carries, fixed while the film is closed. */
export interface FilmLoad {
  /** Surfactant of one face with the liquid that belongs to it, mol (0 for a pure liquid). */
  readonly surfactant: number;
  /** Liquid that belongs to one face, m^3 (0 for a film without a bulk). */
  readonly liquid: number;
}

/** The film of one recipe at one temperature. It holds no state of any bubble: the same film serves all bubbles of its recipe. */
export interface Film {
  /** True for a pure liquid: tension never changes, elasticity is 0. Lets the network use its fast kernel. */
  readonly constantTension: boolean;
  /** The tension without surfactant, N/m. */
  readonly cleanTension: number;
  /** The load of one face that has the recipe's loading at area `area` (m^2). */
  load(area: number): FilmLoad;
  /**
   * The state of one face of area `area`, written into `out` at `FILM` offsets. Allocates nothing.
   * @param surfactant mol, of one face
   * @param liquid m^3, of one face
   * @param area m^2
   * @param guess coverage of a nearby state, to start a root search from (NaN: none)
   * An insoluble face pressed towards its saturation area has a tension that falls without bound, below zero too: whoever
   * calls judges whether such a tension can be. At or below the saturation area there is no state: tension and elasticity
   * are NaN.
   */
  evaluate(surfactant: number, liquid: number, area: number, guess: number, out: Float64Array): void;
  /**
   * Surfactant that one face and its liquid hold in the state last found, mol, counted from coverage and concentrations: the
   * balance against `surfactant` shows how well that state was found.
   * @param out what `evaluate` wrote
   */
  held(surfactant: number, liquid: number, area: number, out: Float64Array): number;
}
