/**
 * Which bubbles a mode feeds and which it starves. A linear mode has no sign of its own: the present flow gives it one.
 */

/** What is known of the nodes beside the mode. */
export interface NodeSigns {
  /** 1 for the nodes that may be named (bubbles); all where absent. */
  readonly named?: Uint8Array;
  /** Net present inflow of each node, mol/s. */
  readonly flow?: Float64Array;
  /** Present pressure of each node, Pa. */
  readonly pressure?: Float64Array;
}

export interface ModeGroups {
  /** Nodes that gain, the greatest gain first. */
  readonly feeds: number[];
  /** Nodes that lose, the greatest loss first. */
  readonly starves: number[];
}

/** A node is named where its change is at least this share of the greatest of its own sign among the named. */
const SHARE = 0.3;
/** And at least this share of the greatest of either sign: a gain spread thin over hundreds feeds nobody in particular. */
const NOTICEABLE = 0.01;

/**
 * Names the two groups of a mode.
 *
 * Orientation: the mode goes the way the gas goes now (not negative against `flow`). Where there is no flow along it,
 * the named node of highest pressure among those that change most loses; where no pressures are given, the first node
 * that changes most loses.
 * @param nodes the nodes of the mode, and `change` their change of amount, any scale
 */
export function modeGroups(nodes: Int32Array, change: Float64Array, signs: NodeSigns): ModeGroups {
  const sign = orientation(nodes, change, signs);
  let gain = 0;
  let loss = 0;
  for (let k = 0; k < nodes.length; k++) {
    if (signs.named !== undefined && signs.named[nodes[k]!] !== 1) continue;
    gain = Math.max(gain, sign * change[k]!);
    loss = Math.max(loss, -sign * change[k]!);
  }
  const noticeable = NOTICEABLE * Math.max(gain, loss);
  const feeds: number[] = [];
  const starves: number[] = [];
  for (let k = 0; k < nodes.length; k++) {
    if (signs.named !== undefined && signs.named[nodes[k]!] !== 1) continue;
    const x = sign * change[k]!;
    if (x > 0 && x >= SHARE * gain && x >= noticeable) feeds.push(k);
    if (x < 0 && -x >= SHARE * loss && -x >= noticeable) starves.push(k);
  }
  const bySize = (a: number, b: number) => Math.abs(change[b]!) - Math.abs(change[a]!) || a - b;
  return {
    feeds: feeds.sort(bySize).map((k) => nodes[k]!),
    starves: starves.sort(bySize).map((k) => nodes[k]!),
  };
}

function orientation(nodes: Int32Array, change: Float64Array, signs: NodeSigns): number {
  let along = 0;
  let flows = 0;
  let changes = 0;
  let greatest = 0;
  for (let k = 0; k < nodes.length; k++) {
    const x = change[k]!;
    const flow = signs.flow?.[nodes[k]!] ?? 0;
    along += x * flow;
    flows += flow * flow;
    changes += x * x;
    if (signs.named === undefined || signs.named[nodes[k]!] === 1) greatest = Math.max(greatest, Math.abs(x));
  }
  if (Math.abs(along) > 1e-12 * Math.sqrt(flows * changes)) return along > 0 ? 1 : -1;
  let loser = -1;
  let highest = -Infinity;
  for (let k = 0; k < nodes.length; k++) {
    if (signs.named !== undefined && signs.named[nodes[k]!] !== 1) continue;
    // A mode's equal partners differ by rounding: they all count as changing most.
    if (Math.abs(change[k]!) < (signs.pressure === undefined ? 1 - 1e-6 : SHARE) * greatest) continue;
    const pressure = signs.pressure?.[nodes[k]!] ?? 0;
    if (loser >= 0 && pressure <= highest) continue;
    loser = k;
    highest = pressure;
  }
  return loser >= 0 && change[loser]! > 0 ? -1 : 1;
}
