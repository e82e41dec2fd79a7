/** Which bubbles may be carried apart when they die: free spheres that gas leaves by diffusion only, in a vessel of constant pressure. */
import { type Network } from '../network/network.ts';
import { LINK_KERNELS } from '../transfer/register.ts';
import type { RunSettings } from './settings.ts';

/** One entry a node: 1 for a candidate. */
export function carriedCandidates(network: Network): Uint8Array {
  const { nodes } = network;
  const candidate = new Uint8Array(nodes.count);
  if (network.ambient.wave !== 'constant') return candidate;
  for (let i = 0; i < nodes.bubbleCount; i++) {
    candidate[i] = nodes.mouth[i] === 0 && nodes.wallStiffness[i] === 0 ? 1 : 0;
  }
  for (const table of network.links) {
    if (LINK_KERNELS[table.kind].diffusive) continue;
    for (let l = 0; l < table.count; l++) {
      candidate[table.from[l]!] = 0;
      candidate[table.to[l]!] = 0;
    }
  }
  for (const feed of network.feeds) candidate[feed.node] = 0;
  return candidate;
}

/** Below this many candidates each vanishing is a stop of the main system: exact, and cheap enough. */
const FEWEST_CARRIED = 24;

/**
 * Whether a run that begins with these candidates, of which those with 1 in `alive` are there, carries its dying bubbles apart. Where
 * neighbours are to be joined the network changes with each of them, and each is a stop.
 */
export function carriesApart(candidates: Uint8Array, alive: Uint8Array, onVanish: RunSettings['onVanish']): boolean {
  if (onVanish === 'join-neighbours') return false;
  let count = 0;
  for (let i = 0; i < candidates.length; i++) count += candidates[i]! & alive[i]!;
  return count >= FEWEST_CARRIED;
}
