/**
 * Links: their ends found among the nodes, the kinds of the ends held against what the link can join, distances worked out.
 */
import { formatQuantity } from '../quantities/format.ts';
import type { FaultList } from './fault-list.ts';
import {
  LINK_DOCUMENTS,
  type FilmDocument,
  type LinkKind,
  type LiquidDocument,
  type TubeDocument,
} from './link-document.ts';
import type { NodeKind } from './node-document.ts';
import { isRecord, ownValue, pathTo, showValue } from './path.ts';
import { isGiven, readRecord, type Reading } from './reading.ts';
import type { BubbleNode, FilmLink, LiquidLink, ScenarioLink, ScenarioNode } from './schema.ts';
import { reportWord } from './translate.ts';

export type LinkReading =
  | { readonly kind: 'tube'; readonly reading: Reading<TubeDocument> }
  | { readonly kind: 'film'; readonly reading: Reading<FilmDocument> }
  | { readonly kind: 'liquid'; readonly reading: Reading<LiquidDocument> };

/** The nodes by id: the kind of each (null where it could not be read), and itself where it is without fault. */
export interface KnownNodes {
  readonly kinds: ReadonlyMap<string, NodeKind | null>;
  readonly nodes: ReadonlyMap<string, ScenarioNode>;
}

export function readLinks(value: unknown, list: FaultList): readonly (LinkReading | null)[] {
  if (value === undefined) return [];
  if (!Array.isArray(value)) {
    const message = `${showValue(value)} stands here; a list of links is needed`;
    list.error('links', 'type', message, { actual: value, expected: 'a list of links' });
    return [];
  }
  return value.map((entry: unknown, index) => readLink(entry, `links[${index}]`, list));
}

function readLink(value: unknown, path: string, list: FaultList): LinkReading | null {
  if (!isRecord(value)) {
    list.error(path, 'type', `${showValue(value)} stands here; a link is needed`, {
      actual: value,
      expected: 'a link',
    });
    return null;
  }
  const kind = ownValue(value, 'kind');
  if (typeof kind !== 'string' || !Object.hasOwn(LINK_DOCUMENTS, kind)) {
    reportWord(pathTo(path, 'kind'), kind, Object.keys(LINK_DOCUMENTS), list);
    return null;
  }
  switch (kind as LinkKind) {
    case 'tube':
      return { kind: 'tube', reading: readRecord('a tube', LINK_DOCUMENTS.tube, value, path, list) };
    case 'film':
      return { kind: 'film', reading: readRecord('a film', LINK_DOCUMENTS.film, value, path, list) };
    case 'liquid':
      return { kind: 'liquid', reading: readRecord('a liquid path', LINK_DOCUMENTS.liquid, value, path, list) };
  }
}

/** The link, or null where a fault prevents it; every fault goes to the list. */
export function resolveLink(link: LinkReading, known: KnownNodes, list: FaultList): ScenarioLink | null {
  const { path, fields } = link.reading;
  const joined = checkEnds(link, known, list);
  const open = fields.open ?? null;
  const { id, from, to } = fields;
  switch (link.kind) {
    case 'tube': {
      const { bore, length, viscosity = null } = link.reading.fields;
      if (!joined || id === undefined || from === undefined || to === undefined) return null;
      if (bore === undefined || length === undefined) return null;
      return { kind: 'tube', id, from, to, bore, length, viscosity, open };
    }
    case 'film': {
      const passage = resolvePassage(link.reading, list);
      const { area, monolayer = null } = link.reading.fields;
      if (!joined || id === undefined || from === undefined || to === undefined) return null;
      if (area === undefined || passage === null) return null;
      const contact: FilmLink['contact'] =
        typeof area === 'number' ? { kind: 'area', value: area } : { kind: 'share', value: area.share };
      return { kind: 'film', id, from, to, contact, ...passage, monolayer, open };
    }
    case 'liquid': {
      if (!joined || from === undefined || to === undefined) return null;
      const toPool = known.kinds.get(from) === 'pool' || known.kinds.get(to) === 'pool';
      const distance = toPool ? null : resolveDistance(link.reading, known.nodes.get(from), known.nodes.get(to), list);
      const { transient } = link.reading.fields;
      if (toPool && isGiven(link.reading, 'distance')) {
        const message = 'not used to a pool, which is far away on all sides; leave it out';
        list.error(pathTo(path, 'distance'), 'contradiction', message, { actual: link.reading.raw.distance });
      }
      if (!toPool && transient === true) {
        const message = 'possible to a pool only; between two bubbles leave it out';
        list.error(pathTo(path, 'transient'), 'contradiction', message, { actual: true });
      }
      if (id === undefined || transient === undefined) return null;
      if (!toPool && distance === null) return null;
      return { kind: 'liquid', id, from, to, distance, transient, open } satisfies LiquidLink;
    }
  }
}

/** Which kinds a link can join, in either order, and how to say it. */
const JOINS: Readonly<Record<LinkKind, { readonly pairs: readonly string[]; readonly sentence: string }>> = {
  tube: {
    pairs: ['bubble-bubble', 'bubble-cavity', 'bubble-reservoir', 'cavity-cavity', 'cavity-reservoir'],
    sentence: 'a tube joins bubbles, cavities and reservoirs, at most one end being a reservoir',
  },
  film: {
    pairs: ['bubble-bubble', 'bubble-reservoir', 'bubble-pool'],
    sentence: 'a film joins a bubble to a bubble, a reservoir or a pool',
  },
  liquid: {
    pairs: ['bubble-bubble', 'bubble-pool'],
    sentence: 'a liquid path joins a bubble to a bubble or a pool',
  },
};

function checkEnds(link: LinkReading, known: KnownNodes, list: FaultList): boolean {
  const { path, fields } = link.reading;
  const kinds = (['from', 'to'] as const).map((end) => {
    const id = fields[end];
    if (id === undefined) return undefined;
    const kind = known.kinds.get(id);
    if (kind === undefined) {
      const near = list.suggestion(id, known.kinds.keys());
      const message = `${showValue(id)} is the id of no node${near}`;
      list.error(pathTo(path, end), 'unknown-node', message, { actual: id, expected: 'the id of a node' });
    }
    return kind;
  });
  const [first, second] = kinds;
  if (fields.from !== undefined && fields.from === fields.to) {
    const message = `joins ${showValue(fields.from)} to itself; two different nodes are needed`;
    list.error(pathTo(path, 'to'), 'contradiction', message, { actual: fields.to, expected: 'another node' });
    return false;
  }
  if (first === undefined || first === null || second === undefined || second === null) return false;
  const { pairs, sentence } = JOINS[link.kind];
  if (pairs.includes(`${first}-${second}`) || pairs.includes(`${second}-${first}`)) return true;
  const message = `cannot join a ${first} to a ${second}: ${sentence}`;
  list.error(path, 'kinds', message, { expected: sentence });
  return false;
}

function resolvePassage(
  reading: Reading<FilmDocument>,
  list: FaultList,
): Pick<FilmLink, 'thickness' | 'permeance'> | null {
  const hasThickness = isGiven(reading, 'thickness');
  const hasPermeance = isGiven(reading, 'permeance');
  if (hasThickness && hasPermeance) {
    const message = 'given beside thickness; only one of them can be given';
    list.error(pathTo(reading.path, 'permeance'), 'contradiction', message, { actual: reading.raw.permeance });
    return null;
  }
  if (!hasThickness && !hasPermeance) {
    const message = 'missing; a thickness, or a permeance in its place, is needed';
    list.error(pathTo(reading.path, 'thickness'), 'missing', message, { expected: 'a length' });
    return null;
  }
  if (hasPermeance && isGiven(reading, 'monolayer')) {
    const message = 'not used with permeance, which is of the whole film; leave one of them out';
    list.error(pathTo(reading.path, 'monolayer'), 'contradiction', message, { actual: reading.raw.monolayer });
    return null;
  }
  const { thickness = null, permeance = null } = reading.fields;
  return thickness === null && permeance === null ? null : { thickness, permeance };
}

/** Radius of curvature of a bubble at the start, m. */
function radiusOf(bubble: BubbleNode): number {
  const { kind, value } = bubble.size;
  const mouth = bubble.mouthRadius ?? 0;
  return kind === 'radius' ? value : (mouth * mouth + value * value) / (2 * value);
}

function resolveDistance(
  reading: Reading<LiquidDocument>,
  first: ScenarioNode | undefined,
  second: ScenarioNode | undefined,
  list: FaultList,
): number | null {
  const given = isGiven(reading, 'distance');
  if (given && reading.fields.distance === undefined) return null;
  if (first?.kind !== 'bubble' || second?.kind !== 'bubble') return null;
  let distance = reading.fields.distance;
  if (distance === undefined) {
    if (first.at === null || second.at === null) {
      const message = 'missing; the distance of the two centres is needed, or "at" on both bubbles';
      list.error(pathTo(reading.path, 'distance'), 'missing', message, { expected: 'a length' });
      return null;
    }
    distance = Math.hypot(first.at[0] - second.at[0], first.at[1] - second.at[1], first.at[2] - second.at[2]);
  }
  const reach = radiusOf(first) + radiusOf(second);
  if (distance > reach) return distance;
  const message = `the centres are ${formatQuantity(distance, 'length')} apart and the radii add up to ${formatQuantity(reach, 'length')}; bubbles that are apart, or a film between them, are needed`;
  list.error(given ? pathTo(reading.path, 'distance') : reading.path, 'contradiction', message);
  return null;
}
