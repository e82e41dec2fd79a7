/**
 * The coefficients of the explicit pair of order 5(4) by Tsitouras: seven stages, the last being the first of the next step,
 * with a dense output of order 4. `../explicit.ts` is the stepper that reads them.
 * Source: Ch. Tsitouras, Runge-Kutta pairs of order 5(4) satisfying only the first column simplifying assumption,
 * Computers & Mathematics with Applications 62 (2011) 770-775.
 */

/**
 * One step from (t, y) with step h:
 *
 *     k_i = f(t + nodes_i h, y + h sum_j rows_ij k_j)
 *     y(t + h) = y + h sum_j rows_7j k_j,   error = h sum_j errorWeights_j k_j
 *     y(t + theta h) = y(t) + h sum_j b_j(theta) k_j,   b_j(theta) = sum_m dense_jm theta^m,   m from 1 to 4
 */
export const TSIT5 = {
  order: 5,
  stages: 7,
  nodes: [0, 0.161, 0.327, 0.9, 0.9800255409045097, 1, 1],
  rows: [
    [],
    [0.161],
    [-0.008480655492356989, 0.335480655492357],
    [2.8971530571054935, -6.359448489975075, 4.3622954328695815],
    [5.325864828439257, -11.748883564062828, 7.4955393428898365, -0.09249506636175525],
    [5.86145544294642, -12.92096931784711, 8.159367898576159, -0.071584973281401, -0.028269050394068383],
    [0.09646076681806523, 0.01, 0.4798896504144996, 1.379008574103742, -3.290069515436081, 2.324710524099774],
  ],
  errorWeights: [
    -0.0017800110522257714, -0.0008164344596567469, 0.007880878010261996, -0.1447110071732629, 0.5823571654525552,
    -0.45808210592918697, 0.015151515151515152,
  ],
  dense: [
    [1, -2.763706197274826, 2.9132554618219126, -1.0530884977290216],
    [0, 0.1317, -0.2234, 0.1017],
    [0, 3.9302962368947516, -5.941033872131505, 2.490627285651253],
    [0, -12.411077166933676, 30.33818863028232, -16.548102889244902],
    [0, 37.50931341651104, -88.1789048947664, 47.37952196281928],
    [0, -27.896526289197286, 65.09189467479366, -34.87065786149661],
    [0, 1.5, -4, 2.5],
  ],
  /** Where the stability function passes -1 to +1 on the negative real axis: |R(z)| <= 1 for -3.507 <= z <= 0. */
  stabilityInterval: 3.507,
} as const;
