/**
 * What becomes of a vanished bubble's gas and links: the gas goes in equal parts to what its open links lead to, its links go,
 * and where the user asked for it its neighbours are joined.
 */
import { nameOf, type Build } from './build.ts';
import type { RunEvent } from './record.ts';
import { BUBBLE, type LinkTable, type Network } from '../network/network.ts';
import { GAS_CONSTANT } from '../quantities/constants.ts';
import { TUBE } from '../transfer/tube.ts';
import type { Adjacency } from './adjacency.ts';

/** Places in the adjacency of the open links of node i whose other end lives. */
export function openLinks(
  i: number,
  adjacency: Adjacency,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
): number[] {
  const places: number[] = [];
  for (let e = adjacency.start[i]!; e < adjacency.start[i + 1]!; e++) {
    if (alive[adjacency.other[e]!] !== 0 && linkOpen[adjacency.group[e]!]![adjacency.link[e]!] !== 0) places.push(e);
  }
  return places;
}

/**
 * Hands over all gas of node i; without a neighbour it goes to `dropped`.
 * @returns mol handed over, and the names-to-be of who received it
 */
export function handOver(
  i: number,
  y: Float64Array,
  species: number,
  adjacency: Adjacency,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
  dropped: Float64Array,
): { amount: number; receivers: number[] } {
  const receivers = openLinks(i, adjacency, alive, linkOpen).map((e) => adjacency.other[e]!);
  let amount = 0;
  for (let k = 0; k < species; k++) {
    const rest = y[i * species + k]!;
    amount += rest;
    y[i * species + k] = 0;
    if (receivers.length === 0) dropped[k] = dropped[k]! + rest;
    for (const j of receivers) y[j * species + k]! += rest / receivers.length;
  }
  return { amount, receivers };
}

/** A link that stands in for two that met in a vanished bubble. */
interface Joint {
  readonly group: number;
  readonly first: number;
  readonly second: number;
  readonly from: number;
  readonly to: number;
}

/**
 * The network with the neighbours of node i joined, each two by a link of the kind that led both to it: tubes in series
 * (the narrower bore, a length of equal resistance), films of mean permeance and extent, liquid paths of added distance.
 * Neighbours that are linked already by that kind are left as they are.
 */
export function joinNeighbours(
  network: Network,
  i: number,
  adjacency: Adjacency,
  alive: Uint8Array,
  linkOpen: readonly Uint8Array[],
): Network {
  const places = openLinks(i, adjacency, alive, linkOpen);
  const joints: Joint[] = [];
  for (let a = 0; a < places.length; a++) {
    for (let b = a + 1; b < places.length; b++) {
      const group = adjacency.group[places[a]!]!;
      const from = adjacency.other[places[a]!]!;
      const to = adjacency.other[places[b]!]!;
      const kind = network.links[group]!.kind;
      if (adjacency.group[places[b]!] !== group || from === to || kind === 'pool-path') continue;
      if (network.nodes.kind[from] !== BUBBLE && network.nodes.kind[to] !== BUBBLE && kind !== 'tube') continue;
      const linked = openLinks(from, adjacency, alive, linkOpen).some(
        (e) => adjacency.other[e] === to && adjacency.group[e] === group,
      );
      if (!linked)
        joints.push({ group, first: adjacency.link[places[a]!]!, second: adjacency.link[places[b]!]!, from, to });
    }
  }
  if (joints.length === 0) return network;
  const made: string[] = [];
  const madeBefore = Math.min(0, ...network.links.flatMap((table) => Array.from(table.origin)));
  const links = network.links.map((table, g) => {
    const mine = joints.filter((joint) => joint.group === g);
    return mine.length === 0
      ? table
      : extend(network, table, mine, (joint) => {
          made.push(`${network.linkName(table.origin[joint.first]!)}+${network.linkName(table.origin[joint.second]!)}`);
          return madeBefore - made.length;
        });
  });
  const before = network.linkName;
  return {
    ...network,
    links,
    linkName: (origin) => (origin < madeBefore ? made[madeBefore - origin - 1]! : before(origin)),
  };
}

function extend(
  network: Network,
  table: LinkTable,
  joints: readonly Joint[],
  nameOf: (joint: Joint) => number,
): LinkTable {
  const { stride } = table;
  const count = table.count + joints.length;
  const coefficients = new Float64Array(count * stride);
  coefficients.set(table.coefficients);
  const grow = (from: Float64Array, mean: (joint: Joint) => number): Float64Array =>
    from.length === 0 ? from : Float64Array.from([...from, ...joints.map(mean)]);
  joints.forEach((joint, q) => {
    const a = table.coefficients.subarray(joint.first * stride, (joint.first + 1) * stride);
    const b = table.coefficients.subarray(joint.second * stride, (joint.second + 1) * stride);
    coefficients.set(joined(network, table, a, b), (table.count + q) * stride);
  });
  return {
    ...table,
    count,
    origin: Int32Array.from([...table.origin, ...joints.map(nameOf)]),
    from: Int32Array.from([...table.from, ...joints.map((joint) => joint.from)]),
    to: Int32Array.from([...table.to, ...joints.map((joint) => joint.to)]),
    coefficients,
    open: [...table.open, ...joints.map(() => null)],
    thickness: grow(table.thickness, (joint) => 0.5 * (table.thickness[joint.first]! + table.thickness[joint.second]!)),
    extent: grow(table.extent, (joint) => 0.5 * (table.extent[joint.first]! + table.extent[joint.second]!)),
  };
}

function joined(network: Network, table: LinkTable, a: Float64Array, b: Float64Array): Float64Array {
  switch (table.kind) {
    case 'tube': {
      const series = 1 / (1 / a[TUBE.conductance]! + 1 / b[TUBE.conductance]!);
      const radius = Math.min(a[TUBE.radius]!, b[TUBE.radius]!);
      const length = (Math.PI * radius ** 4) / (16 * series * GAS_CONSTANT * network.temperature);
      const own = a[TUBE.viscosity]!;
      // Two viscosities of their own cannot be one: the mean stands for both.
      return Float64Array.of(series, radius, length, 0.5 * (own + b[TUBE.viscosity]!));
    }
    case 'film-area':
    case 'film-share':
      return a.map((value, k) => 0.5 * (value + b[k]!));
    case 'liquid-path':
    case 'pool-path': {
      const species = network.species.length;
      return a.map((value, k) => (k < species ? value : value + b[k]!));
    }
  }
}

/** @param receivers whom its gas went to; null: all that its open links lead to */
export function vanishedEvent(
  build: Build,
  node: number,
  time: number,
  amount: number,
  receivers: readonly number[] | null,
): RunEvent {
  const names = (receivers ?? openEnds(build, node)).map((i) => nameOf(build, i));
  const detail =
    names.length === 0
      ? 'no neighbour was left to take its gas: it left the network'
      : `its last gas went to ${names.length > 6 ? `${names.slice(0, 6).join(', ')} and ${names.length - 6} more` : names.join(', ')}`;
  return {
    time,
    event: 'bubble-vanished',
    subject: nameOf(build, node),
    partner: '',
    link: '',
    value: amount,
    unit: 'mol',
    detail,
  };
}

/** Nodes at the far ends of a node's open links. */
function openEnds(build: Build, node: number): number[] {
  const { adjacency, alive, linkOpen } = build;
  const ends: number[] = [];
  for (let e = adjacency.start[node]!; e < adjacency.start[node + 1]!; e++) {
    const other = adjacency.other[e]!;
    if (alive[other] !== 0 && linkOpen[adjacency.group[e]!]![adjacency.link[e]!] !== 0) ends.push(other);
  }
  return ends;
}
