/**
 * From the checked scenario back to a file with every default written out. Loading it again gives the same scenario.
 */
import { isRecord } from './path.ts';
import type {
  BubbleNode,
  BubbleSize,
  Composition,
  Feed,
  Gas,
  Recipe,
  Scenario,
  ScenarioLink,
  ScenarioNode,
  Waveform,
} from './schema.ts';

/** The scenario as the JSON of a file, keys in the order of the contract, quantities as numbers in SI. */
export function canonicalScenario(scenario: Scenario): unknown {
  const { format, version, title, notes, temperature, ambient, gases, recipes, run, criteria } = scenario;
  return {
    format,
    version,
    title,
    notes,
    temperature,
    ambient: {
      pressure: writeWaveform(ambient.pressure),
      liquidDensity: ambient.liquidDensity,
      ...present('surfaceHeight', ambient.surfaceHeight),
    },
    gases: mapRecord(gases, writeGas),
    recipes: mapRecord(recipes, writeRecipe),
    nodes: scenario.nodes.map((node) => writeNode(node, scenario.species)),
    links: scenario.links.map(writeLink),
    run: {
      until: run.until,
      ...present('untilBubbles', run.untilBubbles),
      frames: run.frames,
      tolerance: run.tolerance,
      method: run.method,
      vanishRadius: run.vanishRadius,
      onVanish: run.onVanish,
    },
    criteria,
  };
}

/** The text of a scenario file. */
export function saveScenario(scenario: Scenario): string {
  return `${JSON.stringify(canonicalScenario(scenario), null, 2)}\n`;
}

/** One text for one scenario, whatever its spelling and the order of its keys: what its hash is taken of. */
export function canonicalText(scenario: Scenario): string {
  return JSON.stringify(sortKeys(canonicalScenario(scenario)));
}

function sortKeys(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sortKeys);
  if (!isRecord(value)) return value;
  return Object.fromEntries(
    Object.keys(value)
      .sort()
      .map((key) => [key, sortKeys(value[key])]),
  );
}

function present(key: string, value: unknown): Readonly<Record<string, unknown>> {
  return value === null || value === undefined ? {} : { [key]: value };
}

function mapRecord<Value>(
  record: Readonly<Record<string, Value>>,
  write: (value: Value) => unknown,
): Readonly<Record<string, unknown>> {
  return Object.fromEntries(Object.entries(record).map(([name, value]) => [name, write(value)]));
}

function writeWaveform(wave: Waveform): unknown {
  return wave.wave === 'constant' ? wave.value : wave;
}

function writeGas(gas: Gas): unknown {
  return {
    ...present('molarMass', gas.molarMass),
    ...present('viscosity', gas.viscosity),
    ...present('diffusivity', gas.diffusivity),
    ...present('solubility', gas.solubility),
    ...present('source', gas.source),
  };
}

function writeRecipe(recipe: Recipe): unknown {
  return {
    tension: recipe.tension,
    ...present('loading', recipe.loading),
    supply: recipe.supply,
    ...present('micelles', recipe.micelles),
    ...present('source', recipe.source),
  };
}

function writeComposition(gas: Composition, species: readonly string[]): unknown {
  return Object.fromEntries(species.flatMap((name, k) => (gas[k] === 0 ? [] : [[name, gas[k]]])));
}

function writeFeed(feed: Feed | null, species: readonly string[]): Readonly<Record<string, unknown>> {
  if (feed === null) return {};
  return { feed: { rate: writeWaveform(feed.rate), gas: writeComposition(feed.gas, species) } };
}

function writeNode(node: ScenarioNode, species: readonly string[]): unknown {
  const start = { id: node.id, kind: node.kind };
  const end = { gas: writeComposition(node.gas, species), ...present('at', node.at) };
  switch (node.kind) {
    case 'bubble':
      return {
        ...start,
        ...writeSize(node.size, 'radius', 'height'),
        faces: node.faces,
        ...present('mouth', node.mouthRadius === null ? null : 2 * node.mouthRadius),
        recipe: node.recipe,
        ...end,
        ...writeWall(node.wall),
        ...writeFeed(node.feed, species),
      };
    case 'cavity':
      return { ...start, volume: node.volume, pressure: node.pressure, ...end, ...writeFeed(node.feed, species) };
    case 'reservoir':
      return { ...start, pressure: writeWaveform(node.pressure), ...end };
    case 'pool':
      return { ...start, volume: node.volume, saturation: node.saturation, ...end, ...writeFeed(node.feed, species) };
  }
}

function writeSize(size: BubbleSize, radiusKey: string, heightKey: string): Readonly<Record<string, number>> {
  return { [size.kind === 'radius' ? radiusKey : heightKey]: size.value };
}

function writeWall(wall: BubbleNode['wall']): Readonly<Record<string, unknown>> {
  if (wall === null) return {};
  return { wall: { stiffness: wall.stiffness, ...writeSize(wall.rest, 'restRadius', 'restHeight') } };
}

function writeLink(link: ScenarioLink): unknown {
  const start = { id: link.id, kind: link.kind, from: link.from, to: link.to };
  const open = present('open', link.open);
  switch (link.kind) {
    case 'tube':
      return { ...start, bore: link.bore, length: link.length, ...present('viscosity', link.viscosity), ...open };
    case 'film':
      return {
        ...start,
        area: link.contact.kind === 'area' ? link.contact.value : { share: link.contact.value },
        ...present('thickness', link.thickness),
        ...present('permeance', link.permeance),
        ...present('monolayer', link.monolayer),
        ...open,
      };
    case 'liquid':
      return { ...start, ...present('distance', link.distance), transient: link.transient, ...open };
  }
}
