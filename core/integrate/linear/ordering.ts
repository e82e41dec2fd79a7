/**
 * In which order the unknowns of a sparse matrix are eliminated so that little fills in: approximate minimum degree on the
 * quotient graph, where an eliminated unknown stays as an element that stands for the clique of its neighbours.
 * Source: Amestoy, Davis & Duff, An approximate minimum degree ordering algorithm, SIAM J. Matrix Anal. Appl. 17 (1996) 886.
 */
import type { Pattern } from './pattern.ts';

/** Unknowns that meet more others than this many times the root of the size go last, as they are: pools and cavities. */
const CROWDED = 10;

/** The unknowns in the order of their elimination. */
export function eliminationOrder({ size, start, neighbours }: Pattern): Int32Array {
  const order = new Int32Array(size);
  const crowded = Math.max(16, CROWDED * Math.sqrt(size));
  const gone = new Uint8Array(size); // eliminated, or put last
  const last: number[] = [];
  for (let i = 0; i < size; i++) {
    if (start[i + 1]! - start[i]! <= crowded) continue;
    gone[i] = 1;
    last.push(i);
  }
  /** Neighbours that are no member of a common element, and elements that hold the unknown. */
  const free: number[][] = [];
  const elements: number[][] = [];
  for (let i = 0; i < size; i++) {
    const list: number[] = [];
    for (let e = start[i]!; e < start[i + 1]!; e++) if (gone[neighbours[e]!] === 0) list.push(neighbours[e]!);
    free.push(list);
    elements.push([]);
  }
  /** Members of the element that an eliminated unknown became; empty once another has absorbed it. */
  const members: number[][] = Array.from({ length: size }, () => []);
  const absorbed = new Uint8Array(size);
  const queue = createDegreeQueue(size);
  for (let i = size - 1; i >= 0; i--) if (gone[i] === 0) queue.put(i, free[i]!.length);

  const inElement = new Int32Array(size).fill(-1);
  const outside = new Int32Array(size); // members of an element that are not in the new one
  const outsideOf = new Int32Array(size).fill(-1);
  const active = size - last.length;
  for (let step = 0; step < active; step++) {
    const pivot = queue.takeLeast();
    order[step] = pivot;
    gone[pivot] = 1;
    const union: number[] = [];
    const join = (list: readonly number[]): void => {
      for (const i of list) {
        if (gone[i] === 1 || inElement[i] === pivot) continue;
        inElement[i] = pivot;
        union.push(i);
      }
    };
    join(free[pivot]!);
    for (const element of elements[pivot]!) {
      join(members[element]!);
      absorbed[element] = 1;
      members[element] = [];
    }
    members[pivot] = union;
    free[pivot] = [];
    elements[pivot] = [];
    for (const i of union) {
      for (const element of elements[i]!) {
        if (absorbed[element] === 1) continue;
        if (outsideOf[element] !== pivot) {
          outsideOf[element] = pivot;
          outside[element] = members[element]!.length;
        }
        outside[element]!--;
      }
    }
    for (const i of union) {
      const kept: number[] = [pivot];
      let degree = union.length - 1;
      for (const element of elements[i]!) {
        // An element that lies inside the new one adds nothing.
        if (absorbed[element] === 1 || outside[element] === 0) continue;
        kept.push(element);
        degree += outside[element]!;
      }
      elements[i] = kept;
      const stillFree = free[i]!.filter((j) => gone[j] === 0 && inElement[j] !== pivot);
      free[i] = stillFree;
      degree = Math.min(degree + stillFree.length, active - step - 2);
      queue.move(i, degree);
    }
  }
  order.set(last, active);
  return order;
}

interface DegreeQueue {
  put(i: number, degree: number): void;
  move(i: number, degree: number): void;
  /** Takes out one of those with the least degree: the one that came in last. */
  takeLeast(): number;
}

/** Unknowns in doubly linked lists, one a degree. */
function createDegreeQueue(size: number): DegreeQueue {
  const head = new Int32Array(size + 1).fill(-1);
  const after = new Int32Array(size).fill(-1);
  const before = new Int32Array(size).fill(-1);
  const degrees = new Int32Array(size);
  let least = 0;

  function put(i: number, degree: number): void {
    const place = Math.max(0, degree);
    const next = head[place]!;
    degrees[i] = place;
    after[i] = next;
    before[i] = -1;
    if (next >= 0) before[next] = i;
    head[place] = i;
    if (place < least) least = place;
  }

  function remove(i: number): void {
    const next = after[i]!;
    const previous = before[i]!;
    if (next >= 0) before[next] = previous;
    if (previous >= 0) after[previous] = next;
    else head[degrees[i]!] = next;
  }

  return {
    put,
    move(i, degree) {
      remove(i);
      put(i, degree);
    },
    takeLeast() {
      while (head[least]! < 0) least++;
      const i = head[least]!;
      remove(i);
      return i;
    },
  };
}
