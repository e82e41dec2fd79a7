/**
 * Turns a checked scenario into a compiled network and the state it starts from.
 * What only the physics can find wrong (a recipe that contradicts itself, a film that no bubble can carry) comes back as faults.
 */
import { createFilm } from '../films/create.ts';
import type { Film } from '../films/film.ts';
import { loadingFault } from '../films/loading.ts';
import { GAS_CONSTANT, STANDARD_GRAVITY } from '../quantities/constants.ts';
import type { BubbleNode, BubbleSize, Scenario, ScenarioNode } from '../scenario/schema.ts';
import { bubbleVolume, capHeight, faceArea } from './geometry.ts';
import { compileLinks } from './compile-links.ts';
import { BUBBLE, CAVITY, OUTSIDE, POOL, RESERVOIR, type Feed, type Network, type NodeTable } from './network.ts';
import { createNodeState } from './node-state.ts';
import { amountAtSize } from './shaped.ts';
import { waveformSwing, waveformValue, type Waveform } from './waveform.ts';

/** What is wrong, by its path in the file. */
export interface CompileFault {
  readonly path: string;
  readonly message: string;
}

export interface CompiledStart {
  readonly network: Network;
  /** mol, node * species + k; accounts of reservoirs and feeds at zero. */
  readonly amounts: Float64Array;
  /** Radius of each free sphere, height of each cap, m; one entry a node. */
  readonly sizes: Float64Array;
  /** The size of the pressure differences that drive the network, Pa: what cavities and pools must resolve. */
  readonly pressureSignal: number;
}

const KIND_ORDER = { bubble: BUBBLE, cavity: CAVITY, pool: POOL, reservoir: RESERVOIR } as const;

export function compileScenario(scenario: Scenario): { start: CompiledStart } | { faults: CompileFault[] } {
  const faults: CompileFault[] = [];
  const films = compileFilms(scenario, faults);
  if (faults.length > 0) return { faults };

  const order = scenario.nodes.map((_, index) => index);
  order.sort((a, b) => KIND_ORDER[scenario.nodes[a]!.kind] - KIND_ORDER[scenario.nodes[b]!.kind] || a - b);
  const feeds: Feed[] = [];
  order.forEach((index, node) => {
    const given = scenario.nodes[index]!;
    if (given.kind !== 'reservoir' && given.feed !== null) {
      feeds.push({ node, rate: given.feed.rate, fraction: given.feed.gas });
    }
  });

  const count = order.length + (feeds.length > 0 ? 1 : 0);
  const sizes = new Float64Array(count);
  const nodes = compileNodes(scenario, order, count, films, sizes);
  const placeOf = new Map(order.map((index, node) => [scenario.nodes[index]!.id, node]));
  const gas = (key: 'molarMass' | 'viscosity' | 'diffusivity' | 'solubility'): Float64Array =>
    Float64Array.from(scenario.species, (name) => scenario.gases[name]?.[key] ?? NaN);
  const network: Network = {
    temperature: scenario.temperature,
    species: scenario.species,
    molarMass: gas('molarMass'),
    viscosity: gas('viscosity'),
    diffusivity: gas('diffusivity'),
    ambient: scenario.ambient.pressure,
    films: films.list,
    nodes,
    feeds,
    links: compileLinks(scenario, placeOf, nodes, gas('diffusivity'), gas('solubility')),
    nodeName: (origin) => (origin < 0 ? 'outside' : scenario.nodes[origin]!.id),
    linkName: (origin) => scenario.links[origin]!.id,
  };
  const amounts = startingAmounts(scenario, order, network, sizes);
  for (let i = 0; i < nodes.bubbleCount; i++) {
    let whole = 0;
    for (let k = 0; k < scenario.species.length; k++) whole += amounts[i * scenario.species.length + k]!;
    if (whole > 0 && whole < Infinity) continue;
    faults.push({
      path: `nodes[${nodes.origin[i]!}]`,
      message:
        'this bubble has no state to start from: its film or wall pulls it below zero pressure; give it another size, film or wall',
    });
  }
  if (faults.length > 0) return { faults };
  return { start: { network, amounts, sizes, pressureSignal: pressureSignal(network, sizes) } };
}

interface CompiledFilms {
  readonly list: Film[];
  readonly place: ReadonlyMap<string, number>;
}

function compileFilms(scenario: Scenario, faults: CompileFault[]): CompiledFilms {
  const list: Film[] = [];
  const place = new Map<string, number>();
  for (const [name, recipe] of Object.entries(scenario.recipes)) {
    const used = scenario.nodes.some((node) => node.kind === 'bubble' && node.recipe === name);
    if (!used) continue;
    const fault = loadingFault(recipe, scenario.temperature);
    if (fault !== null) {
      const colon = fault.indexOf(':');
      faults.push({ path: `recipes.${name}.${fault.slice(0, colon)}`, message: fault.slice(colon + 1).trim() });
      continue;
    }
    place.set(name, list.length);
    list.push(createFilm(recipe, scenario.temperature));
  }
  return { list, place };
}

/** Radius of a free sphere or height of a cap. */
function sizeOf(size: BubbleSize, mouth: number): number {
  if (size.kind === 'height' || mouth === 0) return size.value;
  return capHeight(mouth, size.value);
}

function compileNodes(
  scenario: Scenario,
  order: readonly number[],
  count: number,
  films: CompiledFilms,
  sizes: Float64Array,
): NodeTable {
  const species = scenario.species.length;
  const real = (fill: (node: ScenarioNode) => number): Float64Array => {
    const column = new Float64Array(count);
    order.forEach((index, i) => (column[i] = fill(scenario.nodes[index]!)));
    return column;
  };
  const ofBubble = (fill: (bubble: BubbleNode) => number): Float64Array =>
    real((node) => (node.kind === 'bubble' ? fill(node) : 0));
  const kind = new Uint8Array(count).fill(OUTSIDE);
  order.forEach((index, i) => (kind[i] = KIND_ORDER[scenario.nodes[index]!.kind]));
  const origin = new Int32Array(count).fill(-1);
  order.forEach((index, i) => (origin[i] = index));
  const { liquidDensity, surfaceHeight } = scenario.ambient;
  const mouth = ofBubble((bubble) => bubble.mouthRadius ?? 0);
  sizes.set(ofBubble((bubble) => sizeOf(bubble.size, bubble.mouthRadius ?? 0)));
  const film = new Int32Array(count);
  const surfactant = new Float64Array(count);
  const liquid = new Float64Array(count);
  order.forEach((index, i) => {
    const node = scenario.nodes[index]!;
    if (node.kind !== 'bubble') return;
    film[i] = films.place.get(node.recipe)!;
    const load = films.list[film[i]]!.load(faceArea(mouth[i]!, sizes[i]!));
    surfactant[i] = load.surfactant;
    liquid[i] = load.liquid;
  });
  const perSpecies = (fill: (node: ScenarioNode, k: number) => number): Float64Array => {
    const column = new Float64Array(count * species);
    order.forEach((index, i) => {
      for (let k = 0; k < species; k++) column[i * species + k] = fill(scenario.nodes[index]!, k);
    });
    return column;
  };
  return {
    count,
    bubbleCount: order.filter((index) => scenario.nodes[index]!.kind === 'bubble').length,
    origin,
    kind,
    faces: ofBubble((bubble) => bubble.faces),
    mouth,
    head: ofBubble((bubble) =>
      bubble.hydrostatic ? liquidDensity * STANDARD_GRAVITY * ((surfaceHeight ?? 0) - bubble.at![2]) : 0,
    ),
    wallStiffness: ofBubble((bubble) => bubble.wall?.stiffness ?? 0),
    wallVolume: ofBubble((bubble) =>
      bubble.wall ? bubbleVolume(bubble.mouthRadius ?? 0, sizeOf(bubble.wall.rest, bubble.mouthRadius ?? 0)) : 0,
    ),
    film,
    surfactant,
    liquid,
    volume: real((node) => (node.kind === 'cavity' ? node.volume : node.kind === 'bubble' ? 0 : Infinity)),
    capacity: perSpecies((node, k) =>
      node.kind === 'pool' ? node.volume * (scenario.gases[scenario.species[k]!]?.solubility ?? NaN) : 0,
    ),
    fraction: perSpecies((node, k) => (node.kind === 'reservoir' ? node.gas[k]! : 0)),
    drive: Array.from({ length: count }, (_, i): Waveform | null => {
      const node = i < order.length ? scenario.nodes[order[i]!]! : null;
      return node?.kind === 'reservoir' ? node.pressure : null;
    }),
  };
}

function startingAmounts(
  scenario: Scenario,
  order: readonly number[],
  network: Network,
  sizes: Float64Array,
): Float64Array {
  const species = network.species.length;
  const RT = GAS_CONSTANT * network.temperature;
  const ambient = waveformValue(network.ambient, 0);
  const state = createNodeState(network);
  const amounts = new Float64Array(network.nodes.count * species);
  order.forEach((index, i) => {
    const node = scenario.nodes[index]!;
    for (let k = 0; k < species; k++) {
      const share = node.gas[k]!;
      switch (node.kind) {
        case 'bubble':
          amounts[i * species + k] = share * amountAtSize(state, i, ambient, sizes[i]!);
          break;
        case 'cavity':
          amounts[i * species + k] = (share * node.pressure * node.volume) / RT;
          break;
        case 'pool':
          amounts[i * species + k] = share * node.saturation * ambient * network.nodes.capacity[i * species + k]!;
          break;
        case 'reservoir':
          break;
      }
    }
  });
  return amounts;
}

/**
 * The smaller of the bubbles' mean capillary pressure and the swing of what drives them (the swing alone where there are no
 * bubbles), and not less than 0.01 Pa.
 */
export function pressureSignal(network: Network, sizes: Float64Array): number {
  const { nodes, films } = network;
  let sum = 0;
  for (let i = 0; i < nodes.bubbleCount; i++) {
    const mouth = nodes.mouth[i]!;
    const radius = mouth > 0 ? (mouth * mouth + sizes[i]! ** 2) / (2 * sizes[i]!) : sizes[i]!;
    sum += (2 * nodes.faces[i]! * films[nodes.film[i]!]!.cleanTension) / radius;
  }
  let signal = nodes.bubbleCount > 0 ? sum / nodes.bubbleCount : Infinity;
  for (const wave of [network.ambient, ...nodes.drive]) {
    const swing = wave === null ? 0 : waveformSwing(wave);
    if (swing > 0 && swing < signal) signal = swing;
  }
  return Number.isFinite(signal) ? Math.max(signal, 0.01) : 1;
}
