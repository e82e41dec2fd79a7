/**
 * From the text of a scenario file, or from its JSON, to the checked scenario - or to every fault in it at once.
 * Nothing here throws for anything that a file may hold.
 */
import type { z } from 'zod';
import { ambientDocument, runDocument, scenarioDocument } from './document.ts';
import { createFaultList, type FaultList } from './fault-list.ts';
import type { Fault } from './fault.ts';
import { gatherGases, gatherRecipes, requireProperties } from './gather.ts';
import { scanJson } from './json-text.ts';
import { isRecord, ownValue, pathTo, showValue } from './path.ts';
import { readRecord } from './reading.ts';
import { readGases, warnOfTemperature } from './resolve-gases.ts';
import { readLinks, resolveLink } from './resolve-links.ts';
import { readNodes, requirePositive, resolveNode, type NodeReading } from './resolve-nodes.ts';
import { knownRecipes, readRecipes } from './resolve-recipes.ts';
import type { Scenario, ScenarioLink, ScenarioNode } from './schema.ts';
import { reportIssues, reportUnknownKey } from './translate.ts';

export type LoadResult =
  | { readonly ok: true; readonly scenario: Scenario; readonly warnings: readonly Fault[] }
  | { readonly ok: false; readonly faults: readonly Fault[] };

/** Loads the text of a scenario file. */
export function loadScenario(text: string): LoadResult {
  const plain = text.startsWith('\uFEFF') ? text.slice(1) : text;
  const { syntax, duplicates, reserved } = scanJson(plain);
  if (syntax !== null) {
    const message = `line ${syntax.line}, column ${syntax.column}: ${syntax.sentence}`;
    const fault: Fault = { path: '', code: 'json-syntax', message, actual: null, expected: 'JSON', severity: 'error' };
    return { ok: false, faults: [fault] };
  }
  const list = createFaultList();
  for (const { path, key } of duplicates) {
    list.error(path, 'duplicate-key', `${JSON.stringify(key)} stands twice in one record; take one of them out`);
  }
  for (const { path, key } of reserved) {
    list.error(path, 'unknown-key', `${JSON.stringify(key)} can be no key of a scenario; take it out`);
  }
  return check(JSON.parse(plain), list);
}

/** Checks what JSON.parse made of a scenario file, or a record of the same form. */
export function checkScenario(value: unknown): LoadResult {
  return check(value, createFaultList());
}

function check(value: unknown, list: FaultList): LoadResult {
  if (!isRecord(value)) {
    list.error('', 'type', `${showValue(value)} stands here; a scenario, as a JSON record, is needed`, {
      actual: value,
    });
    return { ok: false, faults: list.finish().errors };
  }
  const scenario = resolve(value, list);
  const { errors, warnings } = list.finish();
  if (errors.length > 0) return { ok: false, faults: [...errors, ...warnings] };
  if (scenario === null) throw new Error('a scenario without faults did not resolve');
  return { ok: true, scenario, warnings };
}

/** The parts of the file that are read on their own further down. */
const SECTIONS = ['ambient', 'gases', 'recipes', 'nodes', 'links', 'run'] as const;
type Section = (typeof SECTIONS)[number];
type Head = Omit<z.output<typeof scenarioDocument>, Section>;

/** The single fields at the top of the file. */
function readHead(value: Readonly<Record<string, unknown>>, list: FaultList): Partial<Head> {
  const { shape } = scenarioDocument;
  const head: Record<string, unknown> = {};
  for (const [key, field] of Object.entries(shape)) {
    if ((SECTIONS as readonly string[]).includes(key)) continue;
    const written = ownValue(value, key);
    const parsed = field.safeParse(written);
    if (parsed.success) head[key] = parsed.data;
    else reportIssues(parsed.error.issues, written, key, list);
  }
  for (const key of Object.keys(value)) {
    if (!Object.hasOwn(shape, key)) reportUnknownKey(pathTo('', key), key, 'a scenario', Object.keys(shape), list);
  }
  return head;
}

/** Every part is read and checked, whatever is wrong with the others; null where a part could not be resolved. */
function resolve(value: Readonly<Record<string, unknown>>, list: FaultList): Scenario | null {
  const head = readHead(value, list);
  if (head.vessel !== undefined) {
    list.error('vessel', 'not-yet', 'a vessel is not computed by this version yet; give nodes and links instead');
  }
  if (head.criteria !== undefined && head.criteria.length > 0) {
    list.warn('criteria', 'not-yet', 'criteria are not judged by this version yet; the run goes on without them');
  }
  const ambient = readRecord(
    'an ambient',
    ambientDocument,
    Object.hasOwn(value, 'ambient') ? value.ambient : {},
    'ambient',
    list,
  ).fields;
  if (ambient.pressure !== undefined) requirePositive(ambient.pressure, 'ambient.pressure', list);
  const run = readRecord('a run', runDocument, ownValue(value, 'run'), 'run', list).fields;
  if (run.onVanish === 'repack') {
    const message = 'packing afresh is not computed by this version yet; use "drop" or "join-neighbours"';
    list.error('run.onVanish', 'not-yet', message, { actual: run.onVanish });
  }
  const gasReadings = readGases(ownValue(value, 'gases'), list);
  const recipeReadings = readRecipes(ownValue(value, 'recipes'), list);
  const withoutNodes = head.vessel !== undefined && !Object.hasOwn(value, 'nodes');
  const nodeReadings = withoutNodes ? [] : readNodes(ownValue(value, 'nodes'), list);
  const linkReadings = readLinks(ownValue(value, 'links'), list);

  const temperature = head.temperature ?? null;
  const { gases, species } = gatherGases(gasReadings, nodeReadings);
  warnOfTemperature(Object.keys(gases), gasReadings, temperature ?? 298.15, list);
  const recipes = gatherRecipes(recipeReadings, nodeReadings, temperature, list);
  const around = {
    species,
    knownRecipes: knownRecipes(recipeReadings),
    surfaceHeight: ambient.surfaceHeight ?? null,
    vanishRadius: run.vanishRadius ?? null,
  };
  const nodes = nodeReadings.map((node) => (node === null ? null : resolveNode(node, around, list)));
  const kinds = checkIds('nodes', value.nodes, nodeReadings, list);
  const byId = new Map(nodes.flatMap((node) => (node === null ? [] : [[node.id, node] as const])));
  checkIds('links', value.links, linkReadings, list);
  const links = linkReadings.map((link) => (link === null ? null : resolveLink(link, { kinds, nodes: byId }, list)));
  requireProperties(gases, species, nodeReadings, linkReadings, list);
  checkBubbleCount(run.untilBubbles, nodeReadings, list);

  const { format, version, title, notes, criteria } = head;
  const { pressure, liquidDensity, surfaceHeight = null } = ambient;
  const { until, untilBubbles = null, frames, tolerance, method, vanishRadius, onVanish } = run;
  if (format === undefined || version === undefined || title === undefined || notes === undefined) return null;
  if (temperature === null || criteria === undefined || pressure === undefined || liquidDensity === undefined)
    return null;
  if (until === undefined || frames === undefined || tolerance === undefined || method === undefined) return null;
  if (vanishRadius === undefined || onVanish === undefined || onVanish === 'repack' || recipes === null) return null;
  if (nodes.includes(null) || links.includes(null)) return null;
  return {
    format,
    version,
    title,
    notes,
    temperature,
    ambient: { pressure, liquidDensity, surfaceHeight },
    species: species.names,
    gases,
    recipes,
    nodes: nodes as ScenarioNode[],
    links: links as ScenarioLink[],
    run: { until, untilBubbles, frames, tolerance, method, vanishRadius, onVanish },
    criteria,
  };
}

/** Ids that stand twice are faults. Gives the kind by id, null where it could not be read. */
function checkIds<Kind extends string>(
  section: 'nodes' | 'links',
  written: unknown,
  readings: readonly ({ readonly kind: Kind } | null)[],
  list: FaultList,
): ReadonlyMap<string, Kind | null> {
  const first = new Map<string, number>();
  const kinds = new Map<string, Kind | null>();
  if (!Array.isArray(written)) return kinds;
  written.forEach((entry: unknown, index) => {
    const id = isRecord(entry) ? ownValue(entry, 'id') : undefined;
    if (typeof id !== 'string') return;
    const before = first.get(id);
    if (before !== undefined) {
      const message = `${showValue(id)} is already the id of ${section}[${before}]; another id is needed`;
      list.error(`${section}[${index}].id`, 'duplicate-id', message, { actual: id, expected: 'an id of its own' });
      return;
    }
    first.set(id, index);
    kinds.set(id, readings[index]?.kind ?? null);
  });
  return kinds;
}

function checkBubbleCount(
  untilBubbles: number | undefined,
  nodes: readonly (NodeReading | null)[],
  list: FaultList,
): void {
  if (untilBubbles === undefined) return;
  const bubbles = nodes.filter((node) => node?.kind === 'bubble').length;
  if (untilBubbles < bubbles) return;
  const message = `${untilBubbles} is not below the ${bubbles} bubbles of the start; a smaller number is needed`;
  list.error('run.untilBubbles', 'contradiction', message, { actual: untilBubbles });
}
