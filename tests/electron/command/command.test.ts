/** The built command, started as a person or a script starts it: exit statuses, files, streams and signals. */
import { spawn, spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import Ajv from 'ajv/dist/2020.js';
import { csvParse } from 'd3-dsv';
import { beforeAll, describe, expect, it } from 'vitest';
import { scratchDirectory } from '../scratch.ts';
import { TWO_BUBBLES } from './two-bubbles.ts';

const LAUNCHER = 'electron/command/frothwright.mjs';
const FILES = ['bubbles.csv', 'events.csv', 'pairs.csv', 'scenario.froth.json', 'series.csv', 'summary.json'];

function frothwright(...words: string[]): { status: number | null; stdout: string; stderr: string } {
  return spawnSync(process.execPath, [LAUNCHER, ...words], { encoding: 'utf8', maxBuffer: 1 << 26 });
}

function scenarioFile(content: string | object): string {
  const path = join(scratchDirectory(), 'two.froth.json');
  writeFileSync(path, typeof content === 'string' ? content : JSON.stringify(content));
  return path;
}

beforeAll(() => {
  // The launcher builds the command where it is older than its sources.
  expect(frothwright('--version').status).toBe(0);
});

describe('frothwright run', () => {
  it('runs a scenario to its end, in silence, and leaves the files of the contract', () => {
    const out = join(scratchDirectory(), 'results');
    const ended = frothwright('run', scenarioFile(TWO_BUBBLES), '--out', out);
    expect(ended).toMatchObject({ status: 0, stdout: '', stderr: '' });
    expect(readdirSync(out).sort()).toEqual(FILES);
  });

  it('ends its events with run-ended at the end of the run', () => {
    const out = join(scratchDirectory(), 'results');
    frothwright('run', scenarioFile(TWO_BUBBLES), '--out', out);
    const events = csvParse(readFileSync(join(out, 'events.csv'), 'utf8'));
    expect(events.at(-1)).toMatchObject({ event: 'run-ended', time_s: '60' });
    const summary = JSON.parse(readFileSync(join(out, 'summary.json'), 'utf8')) as { tables: unknown };
    expect(summary.tables).toMatchObject({ 'events.csv': events.length });
  });

  it('gives the same bytes twice, but for the wall time', () => {
    const outs = [join(scratchDirectory(), 'one'), join(scratchDirectory(), 'two')];
    const scenario = scenarioFile(TWO_BUBBLES);
    for (const out of outs) frothwright('run', scenario, '--out', out);
    for (const name of FILES) {
      const [one, two] = outs.map((out) =>
        readFileSync(join(out, name), 'utf8').replace(/"wallTime_s": [\d.e-]+/, '"wallTime_s": 0'),
      );
      expect(one === two, name).toBe(true);
    }
  });

  it('gives the same tables from the scenario that it wrote out', () => {
    const first = join(scratchDirectory(), 'first');
    const second = join(scratchDirectory(), 'second');
    frothwright('run', scenarioFile(TWO_BUBBLES), '--out', first, '--until', '2 s');
    frothwright('run', join(first, 'scenario.froth.json'), '--out', second);
    for (const name of FILES.filter((file) => file !== 'summary.json')) {
      expect(readFileSync(join(second, name), 'utf8'), name).toBe(readFileSync(join(first, name), 'utf8'));
    }
  });

  it('ends where --until says, with as many frames as --frames says', () => {
    const out = join(scratchDirectory(), 'results');
    frothwright('run', scenarioFile(TWO_BUBBLES), '--out', out, '--until', '200 ms', '--frames', '4');
    const series = csvParse(readFileSync(join(out, 'series.csv'), 'utf8'));
    expect(series.map((row) => Number(row.time_s))).toEqual(
      [0, 0.05, 0.1, 0.15, 0.2].map((t) => expect.closeTo(t, 12) as number),
    );
  });

  it('prints its summary with --json', () => {
    const out = join(scratchDirectory(), 'results');
    const { stdout } = frothwright('run', scenarioFile(TWO_BUBBLES), '--out', out, '--json');
    expect(stdout).toBe(readFileSync(join(out, 'summary.json'), 'utf8'));
  });
});

describe('Ctrl-C on a run', () => {
  /** Four million frames, the rows of series.csv within its limit: no run is over before the signal comes. */
  const ENDLESS = { ...TWO_BUBBLES, run: { until: '60 s', frames: 4_000_000 } };

  async function interrupted(press: (kill: (signal: NodeJS.Signals) => void) => void) {
    const directory = scratchDirectory();
    const scenario = join(directory, 'two.froth.json');
    writeFileSync(scenario, JSON.stringify(ENDLESS));
    const out = join(directory, 'results');
    const child = spawn(process.execPath, [LAUNCHER, 'run', scenario, '--out', out], {
      stdio: ['ignore', 'pipe', 'pipe'],
    });
    let stderr = '';
    child.stderr.on('data', (chunk: Buffer) => (stderr += chunk.toString()));
    const ended = new Promise<number | null>((resolve) => child.on('close', resolve));
    while (!(existsSync(out) && readdirSync(out).some((name) => name.includes('series.csv')))) {
      if (child.exitCode !== null) throw new Error(`the run ended by itself: ${stderr}`);
      await new Promise((resolve) => setTimeout(resolve, 10));
    }
    press((signal) => child.kill(signal));
    return { status: await ended, stderr, out };
  }

  it.each(['SIGINT', 'SIGTERM'] as const)('(%s) keeps what was computed and exits with 130', async (signal) => {
    const { status, stderr, out } = await interrupted((kill) => kill(signal));
    expect(status).toBe(130);
    expect(stderr).toMatch(/^Stopped at .* of simulated time; what was computed is in /);
    const summary = JSON.parse(readFileSync(join(out, 'summary.json'), 'utf8')) as { stop: unknown };
    expect(summary.stop).toEqual({ kind: 'interrupted' });
    expect(csvParse(readFileSync(join(out, 'events.csv'), 'utf8')).at(-1)).toMatchObject({ event: 'run-ended' });
    expect(readdirSync(out).filter((name) => name.endsWith('.partial'))).toEqual([]);
  });

  it('twice quits at once and leaves nothing', async () => {
    const { status, out } = await interrupted((kill) => {
      // Held still meanwhile, so that both signals are there when it wakes.
      for (const signal of ['SIGSTOP', 'SIGINT', 'SIGTERM', 'SIGCONT'] as const) kill(signal);
    });
    expect(status).toBe(130);
    expect(existsSync(out)).toBe(false);
  });
});

describe('frothwright check', () => {
  it('says of two bubbles of pure liquid on a tube that they do not hold, and which one starves', () => {
    const { status, stdout, stderr } = frothwright('check', scenarioFile(TWO_BUBBLES));
    expect({ status, stderr }).toEqual({ status: 0, stderr: '' });
    expect(stdout).toContain('DOES NOT HOLD');
    expect(stdout).toMatch(/feeds A and starves B/);
    expect(stdout).toMatch(/t1 +A +B .*runs away/);
  });

  it('gives its whole report as JSON', () => {
    const report = JSON.parse(frothwright('check', scenarioFile(TWO_BUBBLES), '--json').stdout) as unknown;
    expect(report).toMatchObject({
      ok: true,
      nodes: { bubble: 2 },
      links: { tube: 1 },
      species: ['air'],
      growing: { count: 1, feeds: ['A'], starves: ['B'] },
      pairs: [{ link: 't1', from: 'A', to: 'B' }],
    });
  });
});

describe('the other commands', () => {
  it('schema prints a JSON Schema that takes a sound scenario and refuses a broken one', () => {
    const { status, stdout } = frothwright('schema');
    expect(status).toBe(0);
    const validate = new Ajv({ strict: false }).compile(JSON.parse(stdout) as object);
    expect(validate(TWO_BUBBLES)).toBe(true);
    expect(validate({ ...TWO_BUBBLES, nodes: 'none' })).toBe(false);
  });

  it('--version prints the version of the package', () => {
    const { version } = JSON.parse(readFileSync('package.json', 'utf8')) as { version: string };
    expect(frothwright('--version').stdout).toBe(`${version}\n`);
  });

  it('--help names the three commands on standard output', () => {
    const { status, stdout } = frothwright('--help');
    expect(status).toBe(0);
    for (const command of ['run', 'check', 'schema']) expect(stdout).toContain(`frothwright ${command}`);
  });

  it('bad usage goes to standard error with exit status 2, or as JSON to standard output', () => {
    const plain = frothwright('rum');
    expect(plain).toMatchObject({ status: 2, stdout: '' });
    expect(plain.stderr).toBe('frothwright: "rum" is not a command; did you mean run?\n');
    const json = frothwright('rum', '--json');
    expect(json).toMatchObject({ status: 2, stderr: '' });
    expect(JSON.parse(json.stdout)).toMatchObject({ ok: false, faults: [{ code: 'usage' }] });
  });
});

describe('a broken file', () => {
  const broken = (change: object): string => JSON.stringify({ ...TWO_BUBBLES, ...change });
  const [A, B] = TWO_BUBBLES.nodes;
  const [tube] = TWO_BUBBLES.links;

  it.each([
    ['is empty', '', /^two\.froth\.json: the file is empty$/],
    ['is cut off', '{ "format": "frothwright"', /^two\.froth\.json: line 1, column 26: .*comma or the closing bracket/],
    ['has a comment', '{ // two bubbles\n}', /^two\.froth\.json: line 1, column 3: a comment stands here/],
    [
      'has a tension for a length',
      broken({ nodes: [{ ...A, radius: '5 mN/m' }, B] }),
      /^nodes\[0\]\.radius: "5 mN\/m" is a surface tension; a length is needed$/,
    ],
    [
      'forgets a unit',
      broken({ nodes: [{ ...A, radius: '5' }, B] }),
      /^nodes\[0\]\.radius: "5" has no unit; a length is needed, such as "50 um"$/,
    ],
    ['misspells a key', broken({ nodes: [{ ...A, mouht: '2 mm' }, B] }), /^nodes\[0\]\.mouht: .*"?mouth"?/],
    ['links to a node that is not there', broken({ links: [{ ...tube, to: 'BB' }] }), /^links\[0\]\.to: .*"?B"?/],
    ['uses an id twice', broken({ nodes: [A, { ...B, id: 'A' }] }), /nodes\[1\]\.id: .*already the id of nodes\[0\]/],
    [
      'names an unknown recipe',
      broken({ nodes: [{ ...A, recipe: 'bear' }, B] }),
      /^nodes\[0\]\.recipe: .*"?bear"?.*"?bare"?/,
    ],
    ['asks for what is not computed yet', broken({ vessel: {} }), /^vessel: .*not computed by this version yet/],
  ])('that %s gets exit status 2 and a helpful line', (_how, content, line) => {
    const out = join(scratchDirectory(), 'results');
    const { status, stdout, stderr } = frothwright('run', scenarioFile(content), '--out', out);
    expect({ status, stdout }).toEqual({ status: 2, stdout: '' });
    expect(stderr.split('\n').filter((text) => !text.endsWith(' (a warning)'))).toContainEqual(
      expect.stringMatching(line),
    );
    expect(existsSync(out)).toBe(false);
  });

  it('with several faults is told all of them at once, one a line', () => {
    const { status, stderr } = frothwright(
      'check',
      scenarioFile(
        broken({
          temperature: '25 mm',
          nodes: [
            { ...A, radius: '5 mN/m' },
            { ...B, faces: 3 },
          ],
        }),
      ),
    );
    expect(status).toBe(2);
    for (const path of ['temperature: ', 'nodes[0].radius: ', 'nodes[1].faces: ']) {
      expect(stderr.split('\n').filter((line) => line.startsWith(path))).toHaveLength(1);
    }
  });

  it('gives its faults as one JSON document with --json', () => {
    const { status, stdout, stderr } = frothwright('check', scenarioFile(broken({ temperature: '25 mm' })), '--json');
    expect({ status, stderr }).toEqual({ status: 2, stderr: '' });
    const document = JSON.parse(stdout) as { faults: unknown[] };
    expect(document).toMatchObject({ ok: false });
    expect(document.faults).toContainEqual(
      expect.objectContaining({ path: 'temperature', code: 'dimension', severity: 'error', actual: '"25 mm"' }),
    );
  });

  it('that is a directory, or is not there, is named', () => {
    const directory = join(scratchDirectory(), 'bank.froth.json');
    mkdirSync(directory);
    expect(frothwright('check', directory).stderr).toBe('bank.froth.json: this is a directory; name the file in it\n');
    expect(frothwright('check', join(directory, 'none.froth.json')).stderr).toBe(
      'none.froth.json: there is no such file\n',
    );
  });
});
