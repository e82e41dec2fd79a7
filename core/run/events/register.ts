/** Everything a run watches for: a new kind of event is one file and one line here. */
import type { WatchMaker } from '../watch.ts';
import { watchLimits } from './limits.ts';
import { watchMouths } from './mouth.ts';
import { watchPairs } from './pairs.ts';
import { watchMicelles, watchSplits } from './phases.ts';

export const WATCHES: readonly WatchMaker[] = [watchPairs, watchMouths, watchSplits, watchMicelles, watchLimits];
