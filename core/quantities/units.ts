/**
 * The units that a scenario may use: their symbols, sizes and powers of the base quantities. Read by unit-expression.ts.
 * Sizes are decimal literals so that they stay exact. Sources: the SI Brochure (9th edition) and NIST Special Publication
 * 811 (2008), appendix B, for the inch, foot, pound, atmosphere, torr, conventional millimetre of mercury and of water.
 */
import { factorOf, multiply, ONE, power, type Factor } from './exact.ts';

/** Powers of kg, m, s, mol, K and rad. The radian is kept apart so that an angle is not taken for a plain number. */
export type Powers = readonly [kg: number, m: number, s: number, mol: number, K: number, rad: number];

export interface Unit {
  readonly factor: Factor;
  readonly powers: Powers;
}

const NONE: Powers = [0, 0, 0, 0, 0, 0];
const MASS: Powers = [1, 0, 0, 0, 0, 0];
const LENGTH: Powers = [0, 1, 0, 0, 0, 0];
const VOLUME: Powers = [0, 3, 0, 0, 0, 0];
const TIME: Powers = [0, 0, 1, 0, 0, 0];
const AMOUNT: Powers = [0, 0, 0, 1, 0, 0];
const TEMPERATURE: Powers = [0, 0, 0, 0, 1, 0];
const ANGLE: Powers = [0, 0, 0, 0, 0, 1];
const FORCE: Powers = [1, 1, -2, 0, 0, 0];
const PRESSURE: Powers = [1, -1, -2, 0, 0, 0];
const VISCOSITY: Powers = [1, -1, -1, 0, 0, 0];

function unit(size: string, powers: Powers): Unit {
  return { factor: factorOf(size), powers };
}

/** Units that take a decimal prefix. */
const PREFIXED = new Map<string, Unit>([
  ['m', unit('1', LENGTH)],
  ['g', unit('1e-3', MASS)],
  ['s', unit('1', TIME)],
  ['mol', unit('1', AMOUNT)],
  ['K', unit('1', TEMPERATURE)],
  ['rad', unit('1', ANGLE)],
  ['N', unit('1', FORCE)],
  ['dyn', unit('1e-5', FORCE)],
  ['Pa', unit('1', PRESSURE)],
  ['bar', unit('1e5', PRESSURE)],
  ['J', unit('1', [1, 2, -2, 0, 0, 0])],
  ['W', unit('1', [1, 2, -3, 0, 0, 0])],
  ['Hz', unit('1', [0, 0, -1, 0, 0, 0])],
  ['L', unit('1e-3', VOLUME)],
  ['l', unit('1e-3', VOLUME)],
  ['P', unit('0.1', VISCOSITY)],
  ['Pas', unit('1', VISCOSITY)],
  ['St', unit('1e-4', [0, 2, -1, 0, 0, 0])],
  ['M', unit('1e3', [0, -3, 0, 1, 0, 0])],
]);

const TORR: Factor = { numerator: 101325n, denominator: 760n, ten: 0 };
const POUND_FORCE = factorOf('4.4482216152605');
/** pi/180 to 40 digits. */
const DEGREE: Factor = multiply(factorOf('3.141592653589793238462643383279502884197'), {
  numerator: 1n,
  denominator: 180n,
  ten: 0,
});

/** Units that stand as they are. */
const PLAIN = new Map<string, Unit>([
  ['1', { factor: ONE, powers: NONE }],
  ['%', unit('1e-2', NONE)],
  ['ppm', unit('1e-6', NONE)],
  ['micron', unit('1e-6', LENGTH)],
  ['Å', unit('1e-10', LENGTH)],
  ['angstrom', unit('1e-10', LENGTH)],
  ['in', unit('0.0254', LENGTH)],
  ['inch', unit('0.0254', LENGTH)],
  ['ft', unit('0.3048', LENGTH)],
  ['mil', unit('0.0000254', LENGTH)],
  ['cc', unit('1e-6', VOLUME)],
  ['sec', unit('1', TIME)],
  ['min', unit('60', TIME)],
  ['h', unit('3600', TIME)],
  ['hr', unit('3600', TIME)],
  ['hour', unit('3600', TIME)],
  ['hours', unit('3600', TIME)],
  ['d', unit('86400', TIME)],
  ['day', unit('86400', TIME)],
  ['days', unit('86400', TIME)],
  ['week', unit('604800', TIME)],
  ['weeks', unit('604800', TIME)],
  ['lb', unit('0.45359237', MASS)],
  ['kgf', unit('9.80665', FORCE)],
  ['lbf', { factor: POUND_FORCE, powers: FORCE }],
  ['atm', unit('101325', PRESSURE)],
  ['torr', { factor: TORR, powers: PRESSURE }],
  ['Torr', { factor: TORR, powers: PRESSURE }],
  ['mTorr', { factor: { ...TORR, ten: -3 }, powers: PRESSURE }],
  ['mmHg', unit('133.322387415', PRESSURE)],
  ['inHg', { factor: multiply(factorOf('25.4'), factorOf('133.322387415')), powers: PRESSURE }],
  ['mmH2O', unit('9.80665', PRESSURE)],
  ['cmH2O', unit('98.0665', PRESSURE)],
  ['inH2O', { factor: multiply(factorOf('25.4'), factorOf('9.80665')), powers: PRESSURE }],
  ['psi', { factor: multiply(POUND_FORCE, power(factorOf('0.0254'), -2)), powers: PRESSURE }],
  ['deg', { factor: DEGREE, powers: ANGLE }],
  ['°', { factor: DEGREE, powers: ANGLE }],
]);

/** Powers of ten by prefix. `u` stands for micro, as does its own sign in either coding once it is normalised. */
const PREFIXES = new Map<string, number>([
  ['f', -15],
  ['p', -12],
  ['n', -9],
  ['u', -6],
  ['m', -3],
  ['c', -2],
  ['d', -1],
  ['h', 2],
  ['k', 3],
  ['M', 6],
  ['G', 9],
]);

/** The unit of a symbol, its prefix included; null when there is none. A whole symbol wins over prefix and symbol. */
export function findUnit(symbol: string): Unit | null {
  const whole = PLAIN.get(symbol) ?? PREFIXED.get(symbol);
  if (whole !== undefined) return whole;
  const ten = PREFIXES.get(symbol.slice(0, 1));
  const base = PREFIXED.get(symbol.slice(1));
  if (ten === undefined || base === undefined) return null;
  return { factor: { ...base.factor, ten: base.factor.ten + ten }, powers: base.powers };
}

/** A temperature in a unit whose zero is not absolute zero: (value + offset) * factor is in K. */
export interface TemperatureScale {
  readonly factor: Factor;
  readonly offset: { readonly digits: bigint; readonly ten: number };
}

const CELSIUS: TemperatureScale = { factor: ONE, offset: { digits: 27315n, ten: -2 } };
const FAHRENHEIT: TemperatureScale = {
  factor: { numerator: 5n, denominator: 9n, ten: 0 },
  offset: { digits: 45967n, ten: -2 },
};

const TEMPERATURE_SCALES = new Map<string, TemperatureScale>([
  ['degC', CELSIUS],
  ['°C', CELSIUS],
  ['degF', FAHRENHEIT],
  ['°F', FAHRENHEIT],
]);

/** The scale of a symbol such as `degC` or `°C`; null when it is none. Only a whole unit text can be one. */
export function findTemperatureScale(symbol: string): TemperatureScale | null {
  return TEMPERATURE_SCALES.get(symbol) ?? null;
}
