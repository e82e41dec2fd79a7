/** The way through the house: imports run one way, never in a circle, and the core reaches nothing outside itself. */
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, normalize, sep } from 'node:path';
import { describe, expect, it } from 'vitest';

interface Import {
  readonly from: string;
  readonly to: string;
  readonly typeOnly: boolean;
}

const posix = (path: string): string => path.split(sep).join('/');

const files = ['core', 'electron', 'tests']
  .flatMap((room) => readdirSync(room, { recursive: true, encoding: 'utf8' }).map((path) => posix(join(room, path))))
  .filter((path) => /\.(ts|mjs|js)$/.test(path));

/** Every `import ... from '...'`, `export ... from '...'` and `import('...')` of a file. */
function importsOf(file: string): Import[] {
  const text = readFileSync(file, 'utf8');
  const found: Import[] = [];
  const pattern = /^(import|export)\s+(type\s+)?[^'";]*?from\s+'([^']+)'|\bimport\('([^']+)'\)|^import\s+'([^']+)'/gm;
  for (const match of text.matchAll(pattern)) {
    const to = match[3] ?? match[4] ?? match[5]!;
    found.push({
      from: file,
      to: to.startsWith('.') ? posix(normalize(join(dirname(file), to))) : to,
      typeOnly: match[2] !== undefined,
    });
  }
  return found;
}

const imports = files.flatMap(importsOf);
const ofCore = imports.filter(({ from }) => from.startsWith('core/'));
const room = (path: string): string => path.split('/')[1]!;
const told = (list: readonly Import[]): string[] => list.map(({ from, to }) => `${from} -> ${to}`);

describe('the core', () => {
  it('is seen by this test', () => {
    expect(ofCore.length).toBeGreaterThan(200);
  });

  it('reaches no page, no Node and no drawing: three libraries and itself', () => {
    const allowed = ['zod', 'ml-matrix', 'odex'];
    expect(told(ofCore.filter(({ to }) => !to.startsWith('core/') && !allowed.includes(to)))).toEqual([]);
  });

  it('has one door to the library that integrates', () => {
    expect(ofCore.filter(({ to }) => to === 'odex').map(({ from }) => from)).toEqual(['core/integrate/odex.js']);
  });

  it('imports against the way of the data, and never along it', () => {
    // Later rooms know earlier ones. The document (scenario) is loaded into the network and knows only what it is written in.
    const knows: Record<string, readonly string[]> = {
      quantities: [],
      substances: ['quantities'],
      films: ['quantities'],
      scenario: ['quantities', 'substances', 'films'],
      network: ['quantities', 'films', 'scenario'],
      transfer: ['quantities', 'network'],
      stability: ['quantities'],
      integrate: [],
      run: ['quantities', 'films', 'scenario', 'network', 'transfer', 'stability', 'integrate'],
      exports: ['run'],
    };
    const wrong = ofCore.filter(
      ({ from, to }) => to.startsWith('core/') && room(to) !== room(from) && !knows[room(from)]?.includes(room(to)),
    );
    expect(told(wrong)).toEqual([]);
  });

  it('knows no bubble in its integrators', () => {
    const words = files
      .filter((path) => path.startsWith('core/integrate/') && path.endsWith('.ts'))
      .filter((path) => /\b(bubble|film|tension|pressure)[A-Z]/.test(readFileSync(path, 'utf8')));
    expect(words).toEqual([]);
  });

  it('takes from the network room no more of the document than its types', () => {
    const taken = ofCore.filter(
      ({ from, to, typeOnly }) => room(from) === 'network' && room(to) === 'scenario' && !typeOnly,
    );
    expect(told(taken)).toEqual([]);
  });
});

describe('imports', () => {
  it('never go in a circle', () => {
    const next = new Map<string, string[]>();
    for (const { from, to } of imports) next.set(from, [...(next.get(from) ?? []), to]);
    const state = new Map<string, 'open' | 'done'>();
    const circles: string[] = [];
    const visit = (file: string, path: readonly string[]): void => {
      state.set(file, 'open');
      for (const to of next.get(file) ?? []) {
        if (state.get(to) === 'open') circles.push([...path.slice(path.indexOf(to)), to].join(' -> '));
        else if (!state.has(to)) visit(to, [...path, to]);
      }
      state.set(file, 'done');
    };
    for (const file of files) if (!state.has(file)) visit(file, [file]);
    expect(circles).toEqual([]);
  });

  it('of the program reach no test', () => {
    expect(told(imports.filter(({ from, to }) => !from.startsWith('tests/') && to.startsWith('tests/')))).toEqual([]);
  });

  it('lead to files that are there', () => {
    const missing = imports.filter(
      ({ to }) => /^(core|electron|tests)\//.test(to) && to.endsWith('.ts') && !files.includes(to),
    );
    expect(told(missing)).toEqual([]);
  });
});
