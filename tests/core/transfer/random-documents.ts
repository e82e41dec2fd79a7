/**
 * Random small networks of every kind of node and link with one to three gases, for the property tests of rates and slopes:
 * free and mounted bubbles, with and without walls, head, films and feeds; cavities, pools, and reservoirs that breathe.
 */
import { generator } from '../stability/random-networks.ts';
import { sample, type Sample } from './sample-networks.ts';

type Random = () => number;
const between = (random: Random, low: number, high: number): number => low + (high - low) * random();
const decades = (random: Random, low: number, high: number): number => low * (high / low) ** random();
const oneOf = <T>(random: Random, list: readonly T[]): T => list[Math.floor(random() * list.length)]!;

const GASES = ['air', 'helium', 'tracer'];
const AMBIENT = 101325;

export interface Wanted {
  readonly species?: 1 | 2 | 3;
  /** Which links may be drawn; all when left out. */
  readonly links?: readonly LinkSort[];
  /** Pressures held, no feeds: where the rates do not know the clock. */
  readonly still?: boolean;
  /** Bubbles without a film's elasticity or a wall: free spheres that all run away. */
  readonly bare?: boolean;
  /** No cavities, pools or reservoirs. */
  readonly bubblesOnly?: boolean;
}

export type LinkSort = 'tube' | 'film-area' | 'film-share' | 'liquid' | 'pool' | 'transient';
const SORTS: readonly LinkSort[] = ['tube', 'film-area', 'film-share', 'liquid', 'pool', 'transient'];

/** The kinds of ends each sort of link can have. */
const ENDS: Readonly<Record<LinkSort, readonly string[]>> = {
  tube: ['bubble-bubble', 'bubble-cavity', 'bubble-reservoir', 'cavity-cavity', 'cavity-reservoir'],
  'film-area': ['bubble-bubble', 'bubble-reservoir', 'bubble-pool'],
  'film-share': ['bubble-bubble', 'bubble-reservoir', 'bubble-pool'],
  liquid: ['bubble-bubble'],
  pool: ['bubble-pool'],
  transient: ['bubble-pool'],
};

interface DrawnNode {
  readonly id: string;
  readonly kind: string;
  readonly radius: number;
  readonly document: Readonly<Record<string, unknown>>;
}

/** A random network, at an instant and in a state away from its start. */
export function randomNetwork(seed: number, wanted: Wanted = {}): { readonly sample: Sample; readonly t: number } {
  const random = generator(seed);
  const species = wanted.species ?? oneOf(random, [1, 2, 3]);
  const gases = GASES.slice(0, species);
  const gas = (): Record<string, number> => Object.fromEntries(gases.map((name) => [name, between(random, 0.1, 1)]));
  const breathing = (mean: number, amplitude: number): unknown =>
    wanted.still === true || random() < 0.3
      ? mean
      : { wave: 'sine', mean, amplitude, period: between(random, 0.5, 3), phase: between(random, 0, 6) };
  const feed = (): Readonly<Record<string, unknown>> =>
    wanted.still === true || random() < 0.7
      ? {}
      : { feed: { rate: { wave: 'sine', mean: 1e-9, amplitude: 5e-10, period: 2 }, gas: gas() } };

  const nodes: DrawnNode[] = [];
  const add = (kind: string, document: Readonly<Record<string, unknown>>, radius = 0): void => {
    nodes.push({ id: `${kind}${nodes.length}`, kind, radius, document });
  };
  for (let b = 2 + Math.floor(random() * 5); b > 0; b--) {
    const radius = decades(random, 5e-5, 5e-3);
    const mounted = wanted.bare !== true && random() < 0.4;
    // Some caps larger than the hemisphere, some smaller.
    const mouth = radius * between(random, 0.3, 1.9);
    add(
      'bubble',
      {
        ...(mounted ? { mouth, height: radius * between(random, 0.4, 1.6) } : { radius }),
        recipe: wanted.bare === true ? 'bare' : oneOf(random, ['bare', 'skin', 'soap']),
        faces: oneOf(random, [1, 2]),
        gas: gas(),
        at: [0, -random()],
        ...(wanted.bare !== true && random() < 0.2 ? { wall: { stiffness: 300 } } : {}),
        ...feed(),
      },
      mounted ? 2.5 * radius : radius,
    );
  }
  const others = (): number => (wanted.bubblesOnly === true ? 0 : Math.floor(random() * 3));
  for (let c = others(); c > 0; c--)
    add('cavity', {
      volume: decades(random, 1e-8, 1e-5),
      pressure: AMBIENT + between(random, 0, 500),
      gas: gas(),
      ...feed(),
    });
  for (let p = others(); p > 0; p--)
    add('pool', { volume: decades(random, 1e-6, 1e-3), saturation: between(random, 0.5, 1.5), gas: gas(), ...feed() });
  for (let r = others(); r > 0; r--)
    add('reservoir', { pressure: breathing(AMBIENT + between(random, -200, 500), 50), gas: gas() });

  const links: unknown[] = [];
  const sorts = wanted.links ?? SORTS;
  for (let attempt = 0; attempt < 6 * nodes.length && links.length < 2 * nodes.length; attempt++) {
    const [from, to] = [oneOf(random, nodes), oneOf(random, nodes)];
    const sort = oneOf(random, sorts);
    const fits = ENDS[sort].includes(`${from.kind}-${to.kind}`) || ENDS[sort].includes(`${to.kind}-${from.kind}`);
    if (from === to || !fits) continue;
    const ends = { id: `l${links.length}`, from: from.id, to: to.id };
    const film = {
      ...ends,
      kind: 'film',
      thickness: decades(random, 1e-7, 1e-5),
      ...(random() < 0.3 ? { monolayer: 1e-3 } : {}),
    };
    switch (sort) {
      case 'tube':
        links.push({
          ...ends,
          kind: 'tube',
          bore: decades(random, 5e-5, 1e-3),
          length: decades(random, 1e-3, 0.1),
          ...(random() < 0.2 ? { viscosity: 2e-5 } : {}),
        });
        break;
      case 'film-area':
        links.push({ ...film, area: decades(random, 1e-9, 1e-5) });
        break;
      case 'film-share':
        links.push({ ...film, area: { share: between(random, 0.05, 0.5) } });
        break;
      case 'liquid':
        links.push({ ...ends, kind: 'liquid', distance: (from.radius + to.radius) * between(random, 1.5, 5) });
        break;
      case 'pool':
      case 'transient':
        links.push({ ...ends, kind: 'liquid', transient: sort === 'transient' });
        break;
    }
  }

  const drawn = sample({
    ambient: { pressure: breathing(AMBIENT, 30), surfaceHeight: 0 },
    gases: {
      air: {},
      helium: {},
      tracer: { molarMass: 0.138, viscosity: 14e-6, diffusivity: 1e-9, solubility: 5e-7 },
    },
    recipes: {
      bare: { tension: { law: 'constant', clean: 0.072 } },
      skin: { tension: { law: 'volmer', clean: 0.072, saturation: 4e-6 }, loading: { coverage: 0.4 } },
      soap: {
        tension: { law: 'frumkin', clean: 0.072, saturation: 4e-6, szyszkowski: 0.05, attraction: 0.5 },
        loading: { coverage: 0.7 },
        supply: { kind: 'closed-film', thickness: 1e-5 },
      },
    },
    nodes: nodes.map(({ id, kind, document }) => ({ id, kind, ...document })),
    links,
  });
  for (let u = 0; u < drawn.y.length; u++) drawn.y[u]! *= between(random, 0.9, 1.1);
  return { sample: drawn, t: between(random, 0.1, 5) };
}
