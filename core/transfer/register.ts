/** The kinds of links, by name: a new kind is one file and one line here (and its name in `network/network.ts`). */
import type { LinkKind } from '../network/network.ts';
import { fixedAreaFilm, sharedAreaFilm } from './film.ts';
import type { LinkKernel } from './link-kernel.ts';
import { betweenBubbles, toPool } from './liquid-path.ts';
import { tube } from './tube.ts';

export const LINK_KERNELS: Readonly<Record<LinkKind, LinkKernel>> = {
  tube,
  'film-area': fixedAreaFilm,
  'film-share': sharedAreaFilm,
  'liquid-path': betweenBubbles,
  'pool-path': toPool,
};
