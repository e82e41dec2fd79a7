/** The links of a scenario as one table a kind, with the coefficients that each kind's kernel states in `core/transfer`. */
import { GAS_CONSTANT } from '../quantities/constants.ts';
import type { FilmLink, LiquidLink, Scenario, ScenarioLink, TubeLink } from '../scenario/schema.ts';
import { POOL, type LinkKind, type LinkTable, type NodeTable } from './network.ts';

/** A link with its place in the file and its ends in the network. */
interface Placed<Link extends ScenarioLink> {
  readonly link: Link;
  readonly origin: number;
  readonly from: number;
  readonly to: number;
}

/**
 * @param placeOf node index by id
 * @param diffusivity,solubility of each species; NaN where the file gives none (no link then needs it)
 */
export function compileLinks(
  scenario: Scenario,
  placeOf: ReadonlyMap<string, number>,
  nodes: NodeTable,
  diffusivity: Float64Array,
  solubility: Float64Array,
): LinkTable[] {
  const species = scenario.species.length;
  const RT = GAS_CONSTANT * scenario.temperature;
  const placed = scenario.links.map((link, origin) => ({
    link,
    origin,
    from: placeOf.get(link.from)!,
    to: placeOf.get(link.to)!,
  }));
  const tubes = placed.filter((p): p is Placed<TubeLink> => p.link.kind === 'tube');
  const films = placed.filter((p): p is Placed<FilmLink> => p.link.kind === 'film');
  const paths = placed.filter((p): p is Placed<LiquidLink> => p.link.kind === 'liquid');
  const meetsPool = (p: Placed<LiquidLink>): boolean => nodes.kind[p.from] === POOL || nodes.kind[p.to] === POOL;

  const permeance = (link: FilmLink, k: number): number =>
    link.permeance ?? filmPermeance(diffusivity[k]!, solubility[k]!, link.thickness!, link.monolayer ?? Infinity);

  const tables: LinkTable[] = [
    table('tube', tubes, 4, ({ link }, out) => {
      const a = link.bore / 2;
      out[0] = (Math.PI * a ** 4) / (16 * link.length * RT);
      out[1] = a;
      out[2] = link.length;
      out[3] = link.viscosity ?? NaN;
    }),
    table(
      'film-area',
      films.filter((p) => p.link.contact.kind === 'area'),
      species,
      ({ link }, out) => {
        for (let k = 0; k < species; k++) out[k] = permeance(link, k) * link.contact.value;
      },
    ),
    table(
      'film-share',
      films.filter((p) => p.link.contact.kind === 'share'),
      species,
      ({ link }, out) => {
        for (let k = 0; k < species; k++) out[k] = permeance(link, k) * link.contact.value * Math.PI;
      },
    ),
    table(
      'liquid-path',
      paths.filter((p) => !meetsPool(p)),
      species + 1,
      ({ link }, out) => {
        for (let k = 0; k < species; k++) out[k] = diffusivity[k]! * solubility[k]!;
        out[species] = link.distance!;
      },
    ),
    table('pool-path', paths.filter(meetsPool), species + 1, ({ link }, out) => {
      for (let k = 0; k < species; k++) out[k] = diffusivity[k]! * solubility[k]!;
      out[species] = link.transient ? 1 : 0;
    }),
  ];
  return tables.filter((one) => one.count > 0);
}

function table<Link extends ScenarioLink>(
  kind: LinkKind,
  links: readonly Placed<Link>[],
  stride: number,
  fill: (link: Placed<Link>, out: Float64Array) => void,
): LinkTable {
  const coefficients = new Float64Array(links.length * stride);
  links.forEach((link, l) => fill(link, coefficients.subarray(l * stride, (l + 1) * stride)));
  const film = (value: (link: FilmLink) => number): Float64Array =>
    kind === 'film-area' || kind === 'film-share'
      ? Float64Array.from(links, ({ link }) => (link.kind === 'film' ? value(link) : NaN))
      : new Float64Array(0);
  return {
    kind,
    count: links.length,
    origin: Int32Array.from(links, ({ origin }) => origin),
    from: Int32Array.from(links, ({ from }) => from),
    to: Int32Array.from(links, ({ to }) => to),
    stride,
    coefficients,
    open: links.map(({ link }) => link.open),
    thickness: film((link) => link.thickness ?? NaN),
    extent: film((link) => link.contact.value),
  };
}

/**
 * Permeance of a film between two monolayers, mol/(m^2 s Pa): `K = D H/(h + 2 D/k_ml)` (Princen & Mason 1965).
 * @param diffusivity m^2/s
 * @param solubility mol/(m^3 Pa)
 * @param thickness m
 * @param monolayer permeability of one monolayer, m/s; Infinity where it resists nothing
 */
export function filmPermeance(diffusivity: number, solubility: number, thickness: number, monolayer: number): number {
  return (diffusivity * solubility) / (thickness + (2 * diffusivity) / monolayer);
}
