/**
 * Nodes: sizes, mouths, walls, gases and recipes brought together and held against each other.
 */
import { formatQuantity } from '../quantities/format.ts';
import type { FaultList } from './fault-list.ts';
import { lowestValue } from './lowest.ts';
import {
  NODE_DOCUMENTS,
  type BubbleDocument,
  type CavityDocument,
  type NodeKind,
  type PoolDocument,
  type ReservoirDocument,
} from './node-document.ts';
import { isRecord, ownValue, pathTo, showValue } from './path.ts';
import { isGiven, readRecord, type Reading } from './reading.ts';
import { resolveComposition, type Species } from './resolve-gases.ts';
import type { BubbleNode, BubbleSize, Composition, Feed, Place, ScenarioNode, Waveform } from './schema.ts';
import { reportWord } from './translate.ts';

/** A node of the file with its kind, as far as it could be read. */
export type NodeReading =
  | { readonly kind: 'bubble'; readonly reading: Reading<BubbleDocument> }
  | { readonly kind: 'cavity'; readonly reading: Reading<CavityDocument> }
  | { readonly kind: 'reservoir'; readonly reading: Reading<ReservoirDocument> }
  | { readonly kind: 'pool'; readonly reading: Reading<PoolDocument> };

/** What a node is held against. */
export interface Surroundings {
  readonly species: Species;
  readonly knownRecipes: readonly string[];
  /** z of the liquid's surface; null where the file gives none. */
  readonly surfaceHeight: number | null;
  /** null where the file's own is at fault. */
  readonly vanishRadius: number | null;
}

/** Reads the list of nodes; what has no known kind is reported and left out, its place in the list kept as null. */
export function readNodes(value: unknown, list: FaultList): readonly (NodeReading | null)[] {
  if (!Array.isArray(value)) {
    list.error(
      'nodes',
      value === undefined ? 'missing' : 'type',
      `${value === undefined ? 'missing' : `${showValue(value)} stands here`}; a list of nodes is needed`,
      { actual: value, expected: 'a list of nodes' },
    );
    return [];
  }
  if (value.length === 0)
    list.error('nodes', 'range', 'the list is empty; at least one node is needed', { actual: value });
  return value.map((entry: unknown, index) => readNode(entry, `nodes[${index}]`, list));
}

function readNode(value: unknown, path: string, list: FaultList): NodeReading | null {
  if (!isRecord(value)) {
    list.error(path, 'type', `${showValue(value)} stands here; a node is needed`, {
      actual: value,
      expected: 'a node',
    });
    return null;
  }
  const kind = ownValue(value, 'kind');
  if (typeof kind !== 'string' || !Object.hasOwn(NODE_DOCUMENTS, kind)) {
    reportWord(pathTo(path, 'kind'), kind, Object.keys(NODE_DOCUMENTS), list);
    return null;
  }
  switch (kind as NodeKind) {
    case 'bubble':
      return { kind: 'bubble', reading: readRecord('a bubble', NODE_DOCUMENTS.bubble, value, path, list) };
    case 'cavity':
      return { kind: 'cavity', reading: readRecord('a cavity', NODE_DOCUMENTS.cavity, value, path, list) };
    case 'reservoir':
      return { kind: 'reservoir', reading: readRecord('a reservoir', NODE_DOCUMENTS.reservoir, value, path, list) };
    case 'pool':
      return { kind: 'pool', reading: readRecord('a pool', NODE_DOCUMENTS.pool, value, path, list) };
  }
}

/** The node, or null where a fault prevents it; every fault goes to the list. */
export function resolveNode(node: NodeReading, around: Surroundings, list: FaultList): ScenarioNode | null {
  const gas = resolveGasOf(node.reading, around.species, list);
  const at: Place | null = node.reading.fields.at ?? null;
  switch (node.kind) {
    case 'bubble':
      return resolveBubble(node.reading, gas, at, around, list);
    case 'cavity': {
      const { id, volume, pressure } = node.reading.fields;
      const feed = resolveFeed(node.reading, around.species, list);
      if (id === undefined || volume === undefined || pressure === undefined || gas === null) return null;
      return { kind: 'cavity', id, volume, pressure, gas, at, feed };
    }
    case 'reservoir': {
      const { id, pressure } = node.reading.fields;
      if (pressure !== undefined) requirePositive(pressure, pathTo(node.reading.path, 'pressure'), list);
      if (id === undefined || pressure === undefined || gas === null) return null;
      return { kind: 'reservoir', id, pressure, gas, at };
    }
    case 'pool': {
      const { id, volume, saturation } = node.reading.fields;
      const feed = resolveFeed(node.reading, around.species, list);
      if (id === undefined || volume === undefined || saturation === undefined || gas === null) return null;
      return { kind: 'pool', id, volume, saturation, gas, at, feed };
    }
  }
}

/** A pressure that falls to zero or below is a slip of a sign or of gauge against absolute. */
export function requirePositive(pressure: Waveform, path: string, list: FaultList): void {
  const lowest = lowestValue(pressure);
  if (lowest > 0) return;
  const message = `falls to ${formatQuantity(lowest, 'pressure')}; an absolute pressure above 0 is needed at all times`;
  list.error(path, 'range', message, { expected: 'a pressure above 0' });
}

function resolveGasOf(
  reading: Reading<{ gas?: Record<string, number> | undefined }>,
  species: Species,
  list: FaultList,
): Composition | null {
  if (isGiven(reading, 'gas') && reading.fields.gas === undefined) return null;
  return resolveComposition(reading.fields.gas, pathTo(reading.path, 'gas'), species, list);
}

function resolveFeed(
  reading: Reading<{ feed?: { rate: Waveform; gas?: Record<string, number> | undefined } | undefined }>,
  species: Species,
  list: FaultList,
): Feed | null {
  const { feed } = reading.fields;
  if (feed === undefined) return null;
  const gas = resolveComposition(feed.gas, pathTo(pathTo(reading.path, 'feed'), 'gas'), species, list);
  return gas === null ? null : { rate: feed.rate, gas };
}

function resolveBubble(
  reading: Reading<BubbleDocument>,
  gas: Composition | null,
  at: Place | null,
  around: Surroundings,
  list: FaultList,
): BubbleNode | null {
  const { path, fields } = reading;
  const mouthRadius = fields.mouth === undefined ? null : fields.mouth / 2;
  const mouthIsFaulty = isGiven(reading, 'mouth') && mouthRadius === null;
  const size = resolveSize(reading, list);
  if (size !== null && !mouthIsFaulty) {
    checkSize(size.size, mouthRadius, pathTo(path, size.key), list);
    checkVanishing(size.size, mouthRadius, around.vanishRadius, pathTo(path, size.key), list);
  }
  const wall = resolveWall(fields.wall, size?.size ?? null, mouthRadius, pathTo(path, 'wall'), list);
  checkRecipe(fields.recipe, pathTo(path, 'recipe'), around.knownRecipes, list);
  const feed = resolveFeed(reading, around.species, list);
  const { surfaceHeight } = around;
  const hydrostatic = surfaceHeight !== null && at !== null && fields.faces === 1;
  if (hydrostatic && at[2] > surfaceHeight) {
    const above = formatQuantity(at[2] - surfaceHeight, 'length');
    const message = `lies ${above} above the surface of the liquid; a bubble with one face is inside the liquid: lower it, raise ambient.surfaceHeight, or leave surfaceHeight out`;
    list.error(pathTo(path, 'at'), 'contradiction', message);
  }
  const { id, faces, recipe } = fields;
  if (id === undefined || size === null || faces === undefined || recipe === undefined || gas === null) return null;
  return {
    kind: 'bubble',
    id,
    size: size.size,
    faces: faces === 2 ? 2 : 1,
    mouthRadius,
    recipe,
    gas,
    at,
    hydrostatic,
    wall,
    feed,
  };
}

const SIZE_KEYS = ['radius', 'diameter', 'height'] as const;

function resolveSize(
  reading: Reading<BubbleDocument>,
  list: FaultList,
): { readonly size: BubbleSize; readonly key: (typeof SIZE_KEYS)[number] } | null {
  const given = SIZE_KEYS.filter((key) => isGiven(reading, key));
  const [key, second] = given;
  if (key === undefined) {
    list.error(
      pathTo(reading.path, 'radius'),
      'missing',
      'missing; a radius, a diameter or, on a mouth, a height is needed',
      {
        expected: 'a length',
      },
    );
    return null;
  }
  if (second !== undefined) {
    const message = `given beside ${key}; only one of radius, diameter and height can be given`;
    list.error(pathTo(reading.path, second), 'contradiction', message, { actual: reading.raw[second] });
    return null;
  }
  const value = reading.fields[key];
  if (value === undefined) return null;
  if (key === 'height') return { key, size: { kind: 'height', value } };
  return { key, size: { kind: 'radius', value: key === 'diameter' ? value / 2 : value } };
}

/** A height needs a mouth to stand on; a cap on a mouth cannot be curved more than the mouth allows. */
function checkSize(size: BubbleSize, mouthRadius: number | null, path: string, list: FaultList): void {
  if (size.kind === 'height') {
    if (mouthRadius !== null) return;
    list.error(path, 'contradiction', 'a free bubble has no height; give its radius, or the mouth that it stands on');
    return;
  }
  if (mouthRadius === null || size.value >= mouthRadius) return;
  const radius = formatQuantity(size.value, 'length');
  const least = formatQuantity(mouthRadius, 'length');
  const message = `a radius of ${radius} is below that of its mouth, ${least}, and no cap has it; a radius of at least ${least}, or a height, is needed`;
  list.error(path, 'contradiction', message, { expected: `a radius of at least ${least}` });
}

function checkVanishing(
  size: BubbleSize,
  mouthRadius: number | null,
  vanishRadius: number | null,
  path: string,
  list: FaultList,
): void {
  if (vanishRadius === null || mouthRadius !== null || size.kind !== 'radius' || size.value > vanishRadius) return;
  const radius = formatQuantity(size.value, 'length');
  const least = formatQuantity(vanishRadius, 'length');
  const message = `a radius of ${radius} is not above run.vanishRadius, ${least}: the bubble would vanish at the start; make it larger or run.vanishRadius smaller`;
  list.error(path, 'contradiction', message, { expected: `a radius above ${least}` });
}

function resolveWall(
  written: BubbleDocument['wall'],
  size: BubbleSize | null,
  mouthRadius: number | null,
  path: string,
  list: FaultList,
): BubbleNode['wall'] {
  if (written === undefined) return null;
  const { stiffness, restRadius, restHeight } = written;
  if (restRadius !== undefined && restHeight !== undefined) {
    list.error(`${path}.restHeight`, 'contradiction', 'given beside restRadius; only one of them can be given');
    return null;
  }
  if (restHeight !== undefined) {
    const rest: BubbleSize = { kind: 'height', value: restHeight };
    checkSize(rest, mouthRadius, `${path}.restHeight`, list);
    return { stiffness, rest };
  }
  if (restRadius !== undefined) {
    const rest: BubbleSize = { kind: 'radius', value: restRadius };
    checkSize(rest, mouthRadius, `${path}.restRadius`, list);
    return { stiffness, rest };
  }
  return size === null ? null : { stiffness, rest: size };
}

function checkRecipe(recipe: string | undefined, path: string, known: readonly string[], list: FaultList): void {
  if (recipe === undefined || known.includes(recipe)) return;
  const near = list.suggestion(recipe, known);
  const message = `${showValue(recipe)} is no recipe of this file, nor a built-in one${near}`;
  list.error(path, 'unknown-recipe', message, { actual: recipe, expected: 'the name of a recipe' });
}
