/** What the bench is asked for. */
import { parseArgs } from 'node:util';
import { NAMES } from './targets.ts';

export const USAGE = `npm run -s bench -- [--only NAME,...] [--peers [DIR]] [--json] ...
  --only NAME,...   these problems alone: ${NAMES.join(', ')}
  --peers [DIR]     programs of other make too, in turn with ours; they are in DIR, else in FROTHWRIGHT_PEERS, else in ../shared/peers
                    beside the checkout
  --peer-timeout S  seconds after which a peer is given up (default 600)
  --repeat N        rounds, each in a process of its own (default 3)
  --tolerance X     our run tolerance, in place of each problem's own; with --calibrate the loosest that is tried
  --calibrate       finds the tolerance at which each program reaches the accuracy asked for, and times nothing
  --json            the measurements as JSON
`;

export interface Asked {
  readonly names: readonly string[];
  readonly peers: boolean;
  /** Null: wherever they are usually found. */
  readonly peersIn: string | null;
  readonly peerTimeout: number;
  readonly repeat: number;
  readonly tolerance: number | null;
  readonly calibrate: boolean;
  readonly json: boolean;
}

/** A sentence of fault, or the usage where that is asked for. */
export type Refusal = { readonly fault: string } | { readonly help: true };

export function readArguments(words: readonly string[]): Asked | Refusal {
  try {
    const { values } = parseArgs({
      args: spellPeers(words),
      options: {
        only: { type: 'string' },
        peers: { type: 'string' },
        'peer-timeout': { type: 'string', default: '600' },
        repeat: { type: 'string', default: '3' },
        tolerance: { type: 'string' },
        calibrate: { type: 'boolean', default: false },
        json: { type: 'boolean', default: false },
        help: { type: 'boolean', short: 'h', default: false },
      },
    });
    if (values.help) return { help: true };
    const names = values.only?.split(',') ?? NAMES;
    const unknown = names.filter((name) => !NAMES.includes(name));
    if (unknown.length > 0) return { fault: `no problem is called ${unknown.join(', ')}` };
    return {
      names,
      peers: values.peers !== undefined,
      peersIn: values.peers === undefined || values.peers === '' ? null : values.peers,
      peerTimeout: positive('--peer-timeout', values['peer-timeout']),
      repeat: Math.ceil(positive('--repeat', values.repeat)),
      tolerance: values.tolerance === undefined ? null : positive('--tolerance', values.tolerance),
      calibrate: values.calibrate,
      json: values.json,
    };
  } catch (error) {
    return { fault: (error as Error).message };
  }
}

/** `--peers` may have a word after it and need not: parseArgs knows only options that always do, or never. */
function spellPeers(words: readonly string[]): string[] {
  const spelt: string[] = [];
  for (const word of words) {
    if (spelt.at(-1) === '--peers=' && !word.startsWith('-')) spelt[spelt.length - 1] = `--peers=${word}`;
    else spelt.push(word === '--peers' ? '--peers=' : word);
  }
  return spelt;
}

function positive(name: string, text: string): number {
  const value = Number(text);
  if (!(value > 0 && Number.isFinite(value))) throw new Error(`${name} ${text}: a number above 0 is needed`);
  return value;
}
