/**
 * The general kernel: spheres and mounted caps with any film and an optional wall.
 * From the amount of gas to size, pressure and their slopes, by Newton's method on the bubble's own pressure balance.
 *
 *   F(x) = p(x) V(x) - n R_gas T = 0,  x = R of a sphere or h of a cap
 *   sphere: p = P + 2 f gamma/R, V = 4/3 pi R^3, A = 4 pi R^2
 *   cap:    p = P + 4 f gamma h/(a^2+h^2), V = pi h (3a^2+h^2)/6, A = pi (a^2+h^2)
 *   wall:   p += K_w (V/V_0 - 1)                                        (physics.md section 2)
 */
import { FILM, FILM_SIZE, type Film } from '../films/film.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { fail, type NodeState } from './node-state.ts';

const filmOut = new Float64Array(FILM_SIZE);
/** p, dp/dx, V, dV/dx, A of one bubble. */
const balance = new Float64Array(5);

/** Pressure, volume and their slopes at size x, into `balance`; the film's answer stays in `filmOut`. */
function evaluateBalance(state: NodeState, film: Film, i: number, P: number, x: number): void {
  const { nodes } = state.network;
  const f = nodes.faces[i]!;
  const a = nodes.mouth[i]!;
  let area: number;
  let volume: number;
  let volumeSlope: number;
  if (a > 0) {
    const s = a * a + x * x;
    area = Math.PI * s;
    volume = (Math.PI * x * (3 * a * a + x * x)) / 6;
    volumeSlope = 0.5 * area;
    film.evaluate(nodes.surfactant[i]!, nodes.liquid[i]!, area, state.coverage[i]!, filmOut);
    const gamma = filmOut[FILM.tension]!;
    balance[0] = P + (4 * f * gamma * x) / s;
    balance[1] = (4 * f * (gamma * (a * a - x * x) + 2 * x * x * filmOut[FILM.elasticity]!)) / (s * s);
  } else {
    area = 4 * Math.PI * x * x;
    volume = (area * x) / 3;
    volumeSlope = area;
    film.evaluate(nodes.surfactant[i]!, nodes.liquid[i]!, area, state.coverage[i]!, filmOut);
    const gamma = filmOut[FILM.tension]!;
    balance[0] = P + (2 * f * gamma) / x;
    balance[1] = ((2 * f) / (x * x)) * (2 * filmOut[FILM.elasticity]! - gamma);
  }
  const K = nodes.wallStiffness[i]!;
  if (K > 0) {
    const rest = nodes.wallVolume[i]!;
    balance[0] += K * (volume / rest - 1);
    balance[1] += (K / rest) * volumeSlope;
  }
  balance[2] = volume;
  balance[3] = volumeSlope;
  balance[4] = area;
}

/**
 * Whether Newton's method may end with this step: its error then is of the order of the step's square, measured against the size,
 * or against the room that a film has left to its full coverage, where the balance has a pole; there, a residual F near rounding
 * will do too. The film is that of `filmOut`.
 */
function isLast(step: number, x: number, F: number, nRT: number): boolean {
  const size = Math.abs(step);
  if (!(size < 1e-8 * x)) return false;
  const coverage = filmOut[FILM.coverage]!;
  return !(coverage > 0) || size < 1e-8 * x * (1 - coverage) || Math.abs(F) < 1e-11 * nRT;
}

/**
 * Root of F by bisection guarded Newton, for the rare case where plain Newton strays: F rises with x (eps >= 0), is negative
 * at small x or where an insoluble film has no state (NaN), and positive at large x.
 * @returns the size, or NaN where none is found
 */
function solveSafely(state: NodeState, film: Film, i: number, P: number, nRT: number, start: number): number {
  let low = 0;
  let high = Infinity;
  let x = start > 0 ? start : 1e-6;
  for (let pass = 0; pass < 400; pass++) {
    evaluateBalance(state, film, i, P, x);
    const F = balance[0]! * balance[2]! - nRT;
    if (F > 0) high = x;
    else low = x;
    const slope = balance[1]! * balance[2]! + balance[0]! * balance[3]!;
    let next = x - F / slope;
    // By a full film the balance is so steep that a step says nothing of how far the root is.
    const stuck = !(Math.abs(F) < 1e-9 * nRT) && Math.abs(next - x) < 1e-6 * x;
    if (stuck || !(next > low && next < high)) next = high === Infinity ? 2 * x : 0.5 * (low + high);
    if ((!stuck && Math.abs(next - x) <= 2e-16 * x) || (high < Infinity && high - low <= 4e-16 * high && low > 0)) {
      return next;
    }
    x = next;
  }
  return NaN;
}

/**
 * Size, pressure, stiffness and film state of the active shaped bubbles.
 * @param withSlopes also fills slopes against amounts and time
 * @returns false where an amount is not positive or no size balances it
 */
export function evaluateShaped(
  state: NodeState,
  ambient: number,
  ambientDrift: number,
  y: Float64Array,
  withSlopes: boolean,
): boolean {
  const { shaped, shapedCount, species, size, sizeSlope, lastAmount } = state;
  const { nodes, films } = state.network;
  const RT = GAS_CONSTANT * state.network.temperature;
  for (let q = 0; q < shapedCount; q++) {
    const i = shaped[q]!;
    let n = y[i * species]!;
    for (let k = 1; k < species; k++) n += y[i * species + k]!;
    if (!(n > 0)) return fail(state, i);
    const film = films[nodes.film[i]!]!;
    const P = ambient + nodes.head[i]!;
    const nRT = n * RT;
    const before = size[i]!;
    let x = before + sizeSlope[i]! * (n - lastAmount[i]!);
    if (!(x > 0.3 * before && x < 3 * before)) x = before;
    let step = NaN;
    let residual = NaN;
    for (let pass = 0; pass < 12; pass++) {
      evaluateBalance(state, film, i, P, x);
      residual = balance[0]! * balance[2]! - nRT;
      step = residual / (balance[1]! * balance[2]! + balance[0]! * balance[3]!);
      if (isLast(step, x, residual, nRT)) break;
      x -= step;
      if (!(x > 0)) {
        step = NaN;
        break;
      }
    }
    if (!isLast(step, x, residual, nRT)) {
      x = solveSafely(state, film, i, P, nRT, before);
      if (!(x > 0)) return fail(state, i);
      evaluateBalance(state, film, i, P, x);
      residual = balance[0]! * balance[2]! - nRT;
      step = residual / (balance[1]! * balance[2]! + balance[0]! * balance[3]!);
      if (!isLast(step, x, residual, nRT) && !(Math.abs(residual) < 1e-9 * nRT)) return fail(state, i);
    }
    const slope = balance[1]! * balance[2]! + balance[0]! * balance[3]!; // dF/dx
    x -= step;
    size[i] = x;
    sizeSlope[i] = RT / slope;
    lastAmount[i] = n;
    state.pressure[i] = balance[0]! - balance[1]! * step;
    const a = nodes.mouth[i]!;
    state.radius[i] = a > 0 ? (a * a + x * x) / (2 * x) : x;
    state.tension[i] = filmOut[FILM.tension]!;
    state.elasticity[i] = filmOut[FILM.elasticity]!;
    state.coverage[i] = filmOut[FILM.coverage]!;
    state.twoPhase[i] = filmOut[FILM.twoPhase]!;
    state.micelles[i] = filmOut[FILM.micelles]!;
    if (withSlopes) {
      const curvature = a > 0 ? (x * x - a * a) / (2 * x * x) : 1; // dR/dx
      state.radiusSlope[i] = (curvature * RT) / slope;
      state.stiffness[i] = (balance[1]! * RT) / slope;
      // At constant n: dx/dt = -(V/F') dP/dt, dp/dt = dP/dt + p' dx/dt.
      const drift = (-balance[2]! / slope) * ambientDrift;
      state.radiusDrift[i] = curvature * drift;
      state.pressureDrift[i] = ambientDrift + balance[1]! * drift;
    }
  }
  return true;
}

/** Gas that a bubble of size x (radius of a sphere, height of a cap) holds at vessel pressure `ambient`, mol. */
export function amountAtSize(state: NodeState, i: number, ambient: number, x: number): number {
  const { nodes, films, temperature } = state.network;
  evaluateBalance(state, films[nodes.film[i]!]!, i, ambient + nodes.head[i]!, x);
  return (balance[0]! * balance[2]!) / (GAS_CONSTANT * temperature);
}

/** As `amountAtSize`, and writes d n/d x and the pressure: out = [n, dn/dx, p]. */
export function amountAndSlopeAtSize(state: NodeState, i: number, ambient: number, x: number, out: Float64Array): void {
  const { nodes, films, temperature } = state.network;
  evaluateBalance(state, films[nodes.film[i]!]!, i, ambient + nodes.head[i]!, x);
  const RT = GAS_CONSTANT * temperature;
  out[0] = (balance[0]! * balance[2]!) / RT;
  out[1] = (balance[1]! * balance[2]! + balance[0]! * balance[3]!) / RT;
  out[2] = balance[0]!;
}
