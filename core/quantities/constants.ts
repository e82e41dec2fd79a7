/**
 * Physical constants, SI. The first thing on the way through: every other room may read them.
 * Exact since the SI of 2019; the decimals of the gas constant are those of CODATA 2018.
 */

/** R, J/(mol K). CODATA 2018. */
export const GAS_CONSTANT = 8.314462618;

/** k, J/K. CODATA 2018, exact. */
export const BOLTZMANN = 1.380649e-23;

/** N_A, 1/mol. CODATA 2018, exact. */
export const AVOGADRO = 6.02214076e23;

/** g_n, m/s^2. Third General Conference on Weights and Measures, 1901. */
export const STANDARD_GRAVITY = 9.80665;
