/**
 * The benchmark problems, as networks for the general driver: pool-N, contacts-M, cycle-B. SI units.
 * Their check values were made by independent solvers at tight tolerance; a run counts only as accurate as it comes near them.
 */
import type { Start } from '../../core/run/build.ts';
import { createFilm } from '../../core/films/create.ts';
import { capHeight, faceArea } from '../../core/network/geometry.ts';
import {
  BUBBLE,
  CAVITY,
  POOL,
  RESERVOIR,
  type LinkTable,
  type Network,
  type NodeTable,
} from '../../core/network/network.ts';
import { createNodeState } from '../../core/network/node-state.ts';
import { amountAtSize } from '../../core/network/shaped.ts';
import { GAS_CONSTANT } from '../../core/quantities/constants.ts';
import type { RunSettings } from '../../core/run/settings.ts';
import type { Film } from '../../core/films/film.ts';

const TEMPERATURE = 298.15;
const AMBIENT = 101325;
const RT = GAS_CONSTANT * TEMPERATURE;
/** Of the pure liquid of the problems, N/m. */
const TENSION = 0.03;

export interface Problem {
  readonly name: string;
  readonly start: Start;
  readonly settings: RunSettings;
  readonly check: {
    readonly endTime: number;
    readonly R21: number;
    readonly radii?: readonly [least: number, greatest: number];
  };
}

/** mulberry32 and Box-Muller, first value of each pair. */
export function gaussian(seed = 12345): () => number {
  let a = seed >>> 0;
  const random = (): number => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return () => {
    const u = Math.max(random(), 1e-12);
    const v = random();
    return Math.sqrt(-2 * Math.log(u)) * Math.cos(2 * Math.PI * v);
  };
}

interface NodeFill {
  readonly count: number;
  readonly bubbleCount: number;
  readonly kinds: readonly number[]; // of the nodes after the bubbles
  readonly faces: number;
  readonly mouth: number;
  readonly sizes: Float64Array;
}

function nodeTable(fill: NodeFill, film: Film): NodeTable {
  const { count, bubbleCount } = fill;
  const real = (value: (i: number) => number): Float64Array => Float64Array.from({ length: count }, (_, i) => value(i));
  const bubbles = (value: (i: number) => number): Float64Array => real((i) => (i < bubbleCount ? value(i) : 0));
  const area = (i: number): number => faceArea(fill.mouth, fill.sizes[i]!);
  return {
    count,
    bubbleCount,
    origin: Int32Array.from({ length: count }, (_, i) => i),
    kind: Uint8Array.from({ length: count }, (_, i) => (i < bubbleCount ? BUBBLE : fill.kinds[i - bubbleCount]!)),
    faces: bubbles(() => fill.faces),
    mouth: bubbles(() => fill.mouth),
    head: real(() => 0),
    wallStiffness: real(() => 0),
    wallVolume: real(() => 0),
    film: new Int32Array(count),
    surfactant: bubbles((i) => film.load(area(i)).surfactant),
    liquid: bubbles((i) => film.load(area(i)).liquid),
    volume: real((i) => (i < bubbleCount ? 0 : Infinity)),
    capacity: new Float64Array(count),
    fraction: real((i) => (i >= bubbleCount && fill.kinds[i - bubbleCount] === RESERVOIR ? 1 : 0)),
    drive: Array.from({ length: count }, () => null),
  };
}

function network(nodes: NodeTable, film: Film, links: readonly LinkTable[], viscosity: number): Network {
  return {
    temperature: TEMPERATURE,
    species: ['air'],
    molarMass: Float64Array.of(0.02896),
    viscosity: Float64Array.of(viscosity),
    diffusivity: Float64Array.of(2e-9),
    ambient: { wave: 'constant', value: AMBIENT },
    films: [film],
    nodes,
    feeds: [],
    links,
    nodeName: (origin) => `n${origin}`,
    linkName: (origin) => `l${origin}`,
  };
}

function bubbleAmounts(net: Network, sizes: Float64Array): Float64Array {
  const state = createNodeState(net);
  const amounts = new Float64Array(net.nodes.count);
  for (let i = 0; i < net.nodes.bubbleCount; i++) amounts[i] = amountAtSize(state, i, AMBIENT, sizes[i]!);
  return amounts;
}

const pureLiquid = (): Film =>
  createFilm(
    { tension: { law: 'constant', clean: TENSION }, loading: null, supply: { kind: 'none' }, micelles: null },
    TEMPERATURE,
  );

function sizesOf(count: number, total: number, size: (g: number) => number): Float64Array {
  const g = gaussian();
  const sizes = new Float64Array(total);
  for (let i = 0; i < count; i++) sizes[i] = size(g());
  return sizes;
}

export const settings = (
  until: number,
  untilBubbles: number | null,
  tolerance: number,
  vanishRadius: number,
): RunSettings => ({
  until,
  untilBubbles,
  frames: 0,
  tolerance,
  method: 'auto',
  vanishRadius,
  onVanish: 'drop',
});

/**
 * Bubbles that exchange one gas with one pool by an interface-limited law, K mol/(m^2 s Pa) over the whole sphere (a film of four
 * times the section). The pool holds a thousandth of the bubbles' gas and starts in balance with a bubble of radius R_21.
 * @param radii m, the pool's place (the last) left zero
 */
export function poolStart(radii: Float64Array, K: number): Start {
  const film = pureLiquid();
  const N = radii.length - 1;
  const nodes = nodeTable({ count: N + 1, bubbleCount: N, kinds: [POOL], faces: 1, mouth: 0, sizes: radii }, film);
  const links: LinkTable = {
    kind: 'film-share',
    count: N,
    origin: Int32Array.from({ length: N }, (_, l) => l),
    from: Int32Array.from({ length: N }, (_, l) => l),
    to: new Int32Array(N).fill(N),
    stride: 1,
    coefficients: new Float64Array(N).fill(K * 4 * Math.PI),
    open: new Array<null>(N).fill(null),
    thickness: new Float64Array(N).fill(NaN),
    extent: new Float64Array(N).fill(4),
  };
  const net = network(nodes, film, [links], 1.85e-5);
  const amounts = bubbleAmounts(net, radii);
  let total = 0;
  let r = 0;
  let rr = 0;
  for (let i = 0; i < N; i++) {
    total += amounts[i]!;
    r += radii[i]!;
    rr += radii[i]! ** 2;
  }
  nodes.capacity[N] = (1e-3 * total) / AMBIENT;
  amounts[N] = nodes.capacity[N] * (AMBIENT + (2 * TENSION) / (rr / r));
  return { network: net, amounts, sizes: radii, pressureSignal: (2 * TENSION * r) / rr };
}

export function poolProblem(N: number, tolerance: number): Problem {
  const start = poolStart(
    sizesOf(N, N + 1, (g) => 50e-6 * Math.exp(0.3 * g)),
    1e-9,
  );
  const checks: Record<number, { endTime: number; R21: number }> = {
    1000: { endTime: 10993.017, R21: 1.26411e-4 },
    10000: { endTime: 11537.66, R21: 1.25854e-4 },
    100000: { endTime: 11386.4, R21: 1.25965e-4 },
  };
  return {
    name: `pool-${N}`,
    start: { ...start, pressureSignal: (2 * TENSION) / 50e-6 },
    settings: settings(1e5, N / 10, tolerance, 2e-6),
    check: checks[N] ?? { endTime: NaN, R21: NaN },
  };
}

/** A cubic lattice of contact films. */
export function contactsProblem(M: number, tolerance: number): Problem {
  const film = pureLiquid();
  const N = M ** 3;
  const sizes = sizesOf(N, N, (g) => 50e-6 * Math.exp(0.3 * g));
  const nodes = nodeTable({ count: N, bubbleCount: N, kinds: [], faces: 1, mouth: 0, sizes }, film);
  const from: number[] = [];
  const to: number[] = [];
  for (let i = 0; i < N; i++) {
    const z = i % M;
    const y = Math.floor(i / M) % M;
    const x = Math.floor(i / (M * M));
    for (const [inside, step] of [
      [x + 1 < M, M * M],
      [y + 1 < M, M],
      [z + 1 < M, 1],
    ] as const) {
      if (!inside) continue;
      from.push(i);
      to.push(i + step);
    }
  }
  const count = from.length;
  const links: LinkTable = {
    kind: 'film-share',
    count,
    origin: Int32Array.from({ length: count }, (_, l) => l),
    from: Int32Array.from(from),
    to: Int32Array.from(to),
    stride: 1,
    coefficients: new Float64Array(count).fill(1e-9 * 0.2 * Math.PI),
    open: new Array<null>(count).fill(null),
    thickness: new Float64Array(count).fill(NaN),
    extent: new Float64Array(count).fill(0.2),
  };
  const net = network(nodes, film, [links], 1.85e-5);
  const checks: Record<number, { endTime: number; R21: number }> = {
    10: { endTime: 22504.148, R21: 7.39881e-5 },
    20: { endTime: 19846.354, R21: 7.31821e-5 },
    30: { endTime: 19289.99, R21: 7.28671e-5 },
  };
  return {
    name: `contacts-${M}`,
    start: { network: net, amounts: bubbleAmounts(net, sizes), sizes, pressureSignal: (2 * TENSION) / 50e-6 },
    settings: settings(1e5, N - Math.ceil(N / 2), tolerance, 2e-6),
    check: checks[M] ?? { endTime: NaN, R21: NaN },
  };
}

/** Thin-film bubbles on mouths, joined by tubes to a cavity that a sine drives: fifty cycles. */
export function cycleProblem(B: number, tolerance: number): Problem {
  const a = 1e-3;
  const film = createFilm(
    {
      tension: { law: 'langmuir', clean: 0.072, saturation: 5e-6, szyszkowski: 1 },
      loading: { coverage: 0.9362 },
      supply: { kind: 'none' },
      micelles: null,
    },
    TEMPERATURE,
  );
  const sizes = sizesOf(B, B + 2, (g) => capHeight(a, 3e-3 * Math.exp(0.05 * g)));
  const nodes = nodeTable(
    { count: B + 2, bubbleCount: B, kinds: [CAVITY, RESERVOIR], faces: 2, mouth: a, sizes },
    film,
  );
  const rest = AMBIENT + (4 * 0.0375) / 3e-3;
  nodes.volume[B] = 2e-6;
  const drive = nodes.drive.slice();
  drive[B + 1] = { wave: 'sine', mean: rest, amplitude: 4, period: 2, phase: 0 };
  const tubes = B + 1;
  const coefficients = new Float64Array(4 * tubes);
  for (let l = 0; l < tubes; l++) {
    const [bore, length] = l < B ? [1e-3, 2e-2] : [0.5e-3, 5e-2];
    coefficients.set([(Math.PI * bore ** 4) / (16 * length * RT), bore, length, NaN], 4 * l);
  }
  const links: LinkTable = {
    kind: 'tube',
    count: tubes,
    origin: Int32Array.from({ length: tubes }, (_, l) => l),
    from: Int32Array.from({ length: tubes }, (_, l) => (l < B ? l : B + 1)),
    to: new Int32Array(tubes).fill(B),
    stride: 4,
    coefficients,
    open: new Array<null>(tubes).fill(null),
    thickness: new Float64Array(0),
    extent: new Float64Array(0),
  };
  const net = network({ ...nodes, drive }, film, [links], 1.85e-5);
  const amounts = bubbleAmounts(net, sizes);
  amounts[B] = (rest * 2e-6) / RT;
  const checks: Record<number, { R21: number; radii: readonly [number, number] }> = {
    8: { R21: 3.02444e-3, radii: [2.873577e-3, 3.234836e-3] },
    32: { R21: 3.04639e-3, radii: [2.739044e-3, 3.366205e-3] },
  };
  return {
    name: `cycle-${B}`,
    start: { network: net, amounts, sizes, pressureSignal: 8 },
    settings: settings(100, null, tolerance, 1e-6),
    check: { endTime: 100, ...(checks[B] ?? { R21: NaN, radii: [NaN, NaN] as const }) },
  };
}
