/** One bubble of every make - free or mounted, bare or with a film, with or without a wall - and what physics.md says of it. */
import fc from 'fast-check';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { sample, type Sample } from '../transfer/sample-networks.ts';

export const ROOM = 298.15;
export const AMBIENT = 101325;

/** Film recipes by name, each with its own way through the kernel. */
export const RECIPES = {
  bare: { tension: { law: 'constant', clean: 0.072 } },
  insoluble: { tension: { law: 'langmuir', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.7 } },
  gaseous: { tension: { law: 'henry', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.5 } },
  volmer: { tension: { law: 'volmer', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.4 } },
  soap: {
    tension: { law: 'frumkin', clean: 0.072, saturation: 4e-6, szyszkowski: 0.05, attraction: 0.5 },
    loading: { coverage: 0.8 },
    supply: { kind: 'closed-film', thickness: 1e-6 },
  },
  micellar: {
    tension: { law: 'langmuir', clean: 0.072, saturation: 4e-6, szyszkowski: 0.5 },
    loading: { concentration: 9 },
    supply: { kind: 'closed-film', thickness: 1e-5 },
    micelles: { cmc: 8 },
  },
  twoPhase: {
    tension: { law: 'frumkin', clean: 0.072, saturation: 4e-6, szyszkowski: 0.05, attraction: 3 },
    loading: { coverage: 0.5 },
    supply: { kind: 'closed-film', thickness: 1e-6 },
  },
} as const;
export type RecipeName = keyof typeof RECIPES;

export interface Bubble {
  /** Radius of a free sphere, height of a mounted cap, m. */
  readonly size: number;
  /** Radius of the mouth, m; 0 for a free sphere. */
  readonly mouth: number;
  readonly faces?: 1 | 2;
  readonly recipe?: RecipeName;
  /** Tension of a recipe of its own: a plain liquid. */
  readonly gamma?: number;
  /** Stiffness, Pa, and the size at rest. */
  readonly wall?: readonly [stiffness: number, rest: number] | null;
  readonly ambient?: unknown;
}

/** The bubble `A` in a network of its own. */
export function bubble(given: Bubble): Sample {
  const { size, mouth, faces = 1, recipe = 'bare', gamma, wall = null, ambient = AMBIENT } = given;
  const rest = mouth > 0 ? 'restHeight' : 'restRadius';
  return sample({
    temperature: ROOM,
    ambient: { pressure: ambient },
    recipes: gamma === undefined ? RECIPES : { bare: { tension: { law: 'constant', clean: gamma } } },
    nodes: [
      {
        id: 'A',
        kind: 'bubble',
        ...(mouth > 0 ? { mouth: 2 * mouth, height: size } : { radius: size }),
        faces,
        recipe,
        gas: { air: 1 },
        ...(wall === null ? {} : { wall: { stiffness: wall[0], [rest]: wall[1] } }),
      },
    ],
  });
}

/**
 * Evaluates twice: film states are those of the last but one iterate, up to 1e-8 of the size away (core/network/shaped.ts), and
 * the second search begins at the root. The second time with slopes. False where there is no state.
 */
export function settle({ system, y }: Sample, t = 0): boolean {
  return system.evaluate(t, y, false) && system.evaluate(t, y, true);
}

/** Volume, m^3, area of one face, m^2, and radius of curvature, m, as physics.md section 2 writes them. */
export function shapeOf(mouth: number, size: number): { volume: number; area: number; radius: number } {
  const [a, h] = [mouth, size];
  return a > 0
    ? {
        volume: (Math.PI * h * (3 * a * a + h * h)) / 6,
        area: Math.PI * (a * a + h * h),
        radius: (a * a + h * h) / (2 * h),
      }
    : { volume: (4 / 3) * Math.PI * h ** 3, area: 4 * Math.PI * h * h, radius: h };
}

/**
 * Pressure, Pa, gas, mol, and u = dp/dn, Pa/mol, of a bubble of given size, tension and elasticity, by physics.md section 2.
 */
export function stateOf(
  given: Bubble,
  gamma: number,
  elasticity = 0,
): { p: number; n: number; u: number; dxdn: number } {
  const { size: x, mouth: a, faces: f = 1, wall = null } = given;
  const { volume, area, radius } = shapeOf(a, x);
  const [K, rest] = wall === null ? [0, 1] : [wall[0], shapeOf(a, wall[1]).volume];
  const ambient = typeof given.ambient === 'number' ? given.ambient : AMBIENT;
  const p = ambient + (2 * f * gamma) / radius + K * (volume / rest - 1);
  const dVdx = a > 0 ? area / 2 : area;
  const capillary =
    a > 0
      ? (4 * f * (gamma * (a * a - x * x) + 2 * x * x * elasticity)) / (a * a + x * x) ** 2
      : ((2 * f) / (x * x)) * (2 * elasticity - gamma);
  const dpdV = capillary / dVdx + K / rest;
  const dndV = (p + volume * dpdV) / (GAS_CONSTANT * ROOM);
  return { p, n: (p * volume) / (GAS_CONSTANT * ROOM), u: dpdV / dndV, dxdn: 1 / (dVdx * dndV) };
}

const real = (min: number, max: number): fc.Arbitrary<number> => fc.double({ min, max, noNaN: true });

/** Any bubble of the rooms and rigs: a free sphere, or a cap from a tenth of the mouth's radius to ten times it. */
export function anyBubble(recipes: readonly RecipeName[]): fc.Arbitrary<Bubble & { readonly recipe: RecipeName }> {
  return fc
    .record({
      scale: real(-5, -2).map((exponent) => 10 ** exponent),
      mounted: fc.boolean(),
      fullness: real(-1, 1).map((exponent) => 10 ** exponent),
      faces: fc.constantFrom<1 | 2>(1, 2),
      recipe: fc.constantFrom(...recipes),
      walled: fc.boolean(),
      stiffness: real(50, 3000),
      rest: real(0.7, 1.3),
    })
    .map(({ scale, mounted, fullness, faces, recipe, walled, stiffness, rest }) => {
      const mouth = mounted ? scale : 0;
      const size = mounted ? fullness * scale : scale;
      return { size, mouth, faces, recipe, wall: walled ? ([stiffness, rest * size] as const) : null };
    });
}
