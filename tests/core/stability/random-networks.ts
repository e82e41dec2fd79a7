/**
 * Random networks with bubbles, cavities, pools and reservoirs in several parts, and their rates from dense eigenvalues:
 * the yardstick that the counting rule and the fast paths are held to.
 */
import { EigenvalueDecomposition, Matrix } from 'ml-matrix';
import type { ModeNetwork } from '../../../core/stability/mode-network.ts';

/** mulberry32: the same numbers for the same seed. */
export function generator(seed: number): () => number {
  let a = seed >>> 0;
  return () => {
    a = (a + 0x6d2b79f5) >>> 0;
    let t = Math.imul(a ^ (a >>> 15), 1 | a);
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t;
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
}

export function networkOf(
  u: readonly number[],
  links: readonly (readonly [number, number, number])[],
  grounded: readonly number[] = [],
): ModeNetwork {
  const ground = new Uint8Array(u.length);
  for (const node of grounded) ground[node] = 1;
  return {
    size: u.length,
    u: Float64Array.from(u),
    from: Int32Array.from(links, (link) => link[0]),
    to: Int32Array.from(links, (link) => link[1]),
    conductance: Float64Array.from(links, (link) => link[2]),
    grounded: ground,
  };
}

/** A small network of any shape: up to a dozen nodes, some of them stiff (cavities), weak (pools) or grounded. */
export function smallNetwork(seed: number): ModeNetwork {
  const random = generator(seed);
  const size = 1 + Math.floor(random() * 11);
  const negativeShare = random() ** 2;
  const u: number[] = [];
  const grounded: number[] = [];
  for (let i = 0; i < size; i++) {
    const kind = random();
    if (kind < 0.08) grounded.push(i);
    if (kind < 0.2) u.push(20 + 100 * random());
    else if (kind < 0.3) u.push(0.01 + 0.05 * random());
    else u.push((random() < negativeShare ? -1 : 1) * (0.2 + random()));
  }
  const links: [number, number, number][] = [];
  const wanted = Math.floor(random() * 2 * size);
  for (let e = 0; e < wanted; e++) {
    const i = Math.floor(random() * size);
    const j = Math.floor(random() * size);
    if (i !== j) links.push([i, j, random() < 0.1 ? 0 : 0.1 + random()]);
  }
  return networkOf(u, links, grounded);
}

/** All rates of `-Lap diag(u)` over the nodes that are not grounded, from the symmetric form, rising. */
export function denseRates(network: ModeNetwork): number[] {
  const places = new Map<number, number>();
  for (let i = 0; i < network.size; i++) if (network.grounded[i] !== 1) places.set(i, places.size);
  const size = places.size;
  if (size === 0) return [];
  const laplacian = Matrix.zeros(size, size);
  network.from.forEach((from, e) => {
    const g = network.conductance[e]!;
    const i = places.get(from);
    const j = places.get(network.to[e]!);
    if (i !== undefined) laplacian.set(i, i, laplacian.get(i, i) + g);
    if (j !== undefined) laplacian.set(j, j, laplacian.get(j, j) + g);
    if (i === undefined || j === undefined) return;
    laplacian.set(i, j, laplacian.get(i, j) - g);
    laplacian.set(j, i, laplacian.get(j, i) - g);
  });
  const spectrum = new EigenvalueDecomposition(laplacian, { assumeSymmetric: true });
  const vectors = spectrum.eigenvectorMatrix;
  // Lap^(1/2) up to a rotation: W = V sqrt(D), and -W' U W has the rates.
  const root = Matrix.zeros(size, size);
  for (let k = 0; k < size; k++) {
    const value = Math.sqrt(Math.max(0, spectrum.realEigenvalues[k]!));
    for (let i = 0; i < size; i++) root.set(i, k, vectors.get(i, k) * value);
  }
  const scaled = root.clone();
  for (const [node, i] of places) scaled.mulRow(i, -network.u[node]!);
  return new EigenvalueDecomposition(root.transpose().mmul(scaled), { assumeSymmetric: true }).realEigenvalues;
}

/** `-Lap diag(u)`, row-major, over the nodes that are not grounded. */
export function jacobianOf(network: ModeNetwork): { matrix: Float64Array; size: number } {
  const places = new Map<number, number>();
  for (let i = 0; i < network.size; i++) if (network.grounded[i] !== 1) places.set(i, places.size);
  const size = places.size;
  const matrix = new Float64Array(size * size);
  network.from.forEach((from, e) => {
    const g = network.conductance[e]!;
    const to = network.to[e]!;
    const i = places.get(from);
    const j = places.get(to);
    if (i !== undefined) matrix[i * size + i]! -= g * network.u[from]!;
    if (j !== undefined) matrix[j * size + j]! -= g * network.u[to]!;
    if (i === undefined || j === undefined) return;
    matrix[i * size + j]! += g * network.u[to]!;
    matrix[j * size + i]! += g * network.u[from]!;
  });
  return { matrix, size };
}
