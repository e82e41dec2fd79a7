/**
 * In which order the nodes of a part are eliminated: fewest neighbours first, with the pattern of the factor.
 * Trees, manifolds, bubbles over a pool and small networks of any shape fill in little; a large bed in three dimensions
 * does not, and is refused so that the iterative path takes it.
 * Source: minimum degree, George & Liu, The evolution of the minimum degree ordering algorithm (1989).
 */

import type { Part } from './mode-network.ts';

/** The factor's pattern. Everything is in positions: position 0 is eliminated first. */
export interface EliminationOrder {
  /** Position of each node. */
  readonly position: Int32Array;
  /** Column k holds `rows[start[k]] .. rows[start[k+1]-1]`, rising positions, all above k. */
  readonly start: Int32Array;
  readonly rows: Int32Array;
  /** Where in `rows` each link of the part adds its conductance. */
  readonly linkPlace: Int32Array;
}

/**
 * @param work the most multiplications one factorisation may take
 * @returns null where the order found would take more
 */
export function eliminationOrder(part: Part, work: number): EliminationOrder | null {
  const graph = new Graph(part);
  const position = new Int32Array(part.size).fill(-1);
  const columns: Int32Array[] = [];
  let spent = 0;
  for (let k = 0; k < part.size; k++) {
    const node = graph.takeLeast();
    const neighbours = graph.eliminate(node);
    position[node] = k;
    columns.push(neighbours);
    spent += neighbours.length * neighbours.length;
    if (spent > work) return null;
  }
  const start = new Int32Array(part.size + 1);
  for (let k = 0; k < part.size; k++) start[k + 1] = start[k]! + columns[k]!.length;
  const rows = new Int32Array(start[part.size]!);
  for (let k = 0; k < part.size; k++) {
    const column = columns[k]!;
    const own = rows.subarray(start[k], start[k + 1]);
    for (let a = 0; a < column.length; a++) own[a] = position[column[a]!]!;
    own.sort();
  }
  const linkPlace = new Int32Array(part.from.length);
  for (let e = 0; e < part.from.length; e++) {
    const i = position[part.from[e]!]!;
    const j = position[part.to[e]!]!;
    linkPlace[e] = find(rows, start[Math.min(i, j)]!, start[Math.min(i, j) + 1]!, Math.max(i, j));
  }
  return { position, start, rows, linkPlace };
}

/** Place of `wanted` in the rising run `rows[low..high)`. */
function find(rows: Int32Array, low: number, high: number, wanted: number): number {
  let first = low;
  let last = high - 1;
  while (first < last) {
    const middle = (first + last) >> 1;
    if (rows[middle]! < wanted) first = middle + 1;
    else last = middle;
  }
  return first;
}

/** The graph of what is not yet eliminated: neighbour lists as linked cells, nodes in buckets by degree. */
class Graph {
  private readonly gone: Uint8Array;
  private readonly degree: Int32Array;
  private readonly head: Int32Array;
  private readonly mark: Int32Array;
  private stamp = 0;
  private cellNode: Int32Array;
  private cellNext: Int32Array;
  private cells = 0;
  private readonly bucket: Int32Array;
  private readonly after: Int32Array;
  private readonly before: Int32Array;
  private least = 0;

  constructor(part: Part) {
    const size = part.size;
    this.gone = new Uint8Array(size);
    this.degree = new Int32Array(size);
    this.head = new Int32Array(size).fill(-1);
    this.mark = new Int32Array(size).fill(-1);
    this.cellNode = new Int32Array(4 * part.from.length + 16);
    this.cellNext = new Int32Array(4 * part.from.length + 16);
    this.bucket = new Int32Array(size + 1).fill(-1);
    this.after = new Int32Array(size).fill(-1);
    this.before = new Int32Array(size).fill(-1);
    // Parallel links count once: first all cells, then one sweep a node that drops what it has marked.
    for (let e = 0; e < part.from.length; e++) {
      this.addCell(part.from[e]!, part.to[e]!);
      this.addCell(part.to[e]!, part.from[e]!);
    }
    for (let i = size - 1; i >= 0; i--) {
      this.degree[i] = this.sweep(i);
      this.insert(i);
    }
  }

  /** Takes the node with the fewest neighbours out of its bucket. */
  takeLeast(): number {
    while (this.bucket[this.least]! < 0) this.least++;
    const node = this.bucket[this.least]!;
    this.remove(node);
    return node;
  }

  /** Removes `node`, joins its neighbours to each other, and returns them. */
  eliminate(node: number): Int32Array {
    this.sweep(node);
    this.gone[node] = 1;
    const neighbours = new Int32Array(this.degree[node]!);
    let count = 0;
    for (let cell = this.head[node]!; cell >= 0; cell = this.cellNext[cell]!)
      neighbours[count++] = this.cellNode[cell]!;
    // The best-connected neighbour (a pool) stands last, so that its long list is never walked.
    const degree = this.degree;
    neighbours.sort((a, b) => degree[a]! - degree[b]! || a - b);
    for (let s = 0; s < count; s++) {
      this.remove(neighbours[s]!);
      degree[neighbours[s]!]!--;
    }
    for (let s = 0; s < count - 1; s++) {
      const i = neighbours[s]!;
      this.sweep(i);
      for (let t = s + 1; t < count; t++) {
        const j = neighbours[t]!;
        if (this.mark[j] === this.stamp) continue;
        this.addCell(i, j);
        this.addCell(j, i);
        degree[i]!++;
        degree[j]!++;
      }
    }
    for (let s = 0; s < count; s++) this.insert(neighbours[s]!);
    return neighbours;
  }

  /** Marks the neighbours of `node`, drops from its list those that are gone or double, and counts the rest. */
  private sweep(node: number): number {
    this.stamp++;
    let count = 0;
    let previous = -1;
    for (let cell = this.head[node]!; cell >= 0; cell = this.cellNext[cell]!) {
      const neighbour = this.cellNode[cell]!;
      if (this.gone[neighbour] === 1 || this.mark[neighbour] === this.stamp) {
        if (previous < 0) this.head[node] = this.cellNext[cell]!;
        else this.cellNext[previous] = this.cellNext[cell]!;
        continue;
      }
      this.mark[neighbour] = this.stamp;
      previous = cell;
      count++;
    }
    return count;
  }

  private addCell(owner: number, neighbour: number): void {
    if (this.cells === this.cellNode.length) {
      const nodes = new Int32Array(2 * this.cells);
      nodes.set(this.cellNode);
      this.cellNode = nodes;
      const next = new Int32Array(2 * this.cells);
      next.set(this.cellNext);
      this.cellNext = next;
    }
    this.cellNode[this.cells] = neighbour;
    this.cellNext[this.cells] = this.head[owner]!;
    this.head[owner] = this.cells++;
  }

  private insert(node: number): void {
    const place = this.degree[node]!;
    const first = this.bucket[place]!;
    this.after[node] = first;
    this.before[node] = -1;
    if (first >= 0) this.before[first] = node;
    this.bucket[place] = node;
    if (place < this.least) this.least = place;
  }

  private remove(node: number): void {
    const next = this.after[node]!;
    const previous = this.before[node]!;
    if (previous >= 0) this.after[previous] = next;
    else this.bucket[this.degree[node]!] = next;
    if (next >= 0) this.before[next] = previous;
  }
}
