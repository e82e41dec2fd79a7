/** The way through the house: imports run one way, never in a circle, and the core reaches nothing outside itself. */
import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, normalize, sep } from 'node:path';
import typescript from 'typescript';
import { describe, expect, it } from 'vitest';

const { preProcessFile } = typescript;

interface Import {
  readonly from: string;
  readonly to: string;
  /** As it stands in the file. */
  readonly written: string;
  readonly typeOnly: boolean;
}

const posix = (path: string): string => path.split(sep).join('/');

const files = ['core', 'electron', 'tests']
  .flatMap((room) => readdirSync(room, { recursive: true, encoding: 'utf8' }).map((path) => posix(join(room, path))))
  .filter((path) => /\.(ts|mjs|js)$/.test(path));

/** Every import and export from another file, the type of one asked for in passing, and those made while running. */
function importsOf(file: string): Import[] {
  const text = readFileSync(file, 'utf8');
  const found: Import[] = [];
  const pattern = /^(import|export)\s+(type\s+)?[^'";]*?from\s+'([^']+)'|\bimport\('([^']+)'\)|^import\s+'([^']+)'/gm;
  for (const match of text.matchAll(pattern)) {
    const to = match[3] ?? match[4] ?? match[5]!;
    found.push({
      from: file,
      written: to,
      to: to.startsWith('.') ? posix(normalize(join(dirname(file), to))) : to,
      typeOnly: match[2] !== undefined,
    });
  }
  return found;
}

const imports = files.flatMap(importsOf);
const ofCore = imports.filter(({ from }) => from.startsWith('core/'));
const room = (path: string): string => path.split('/')[1]!;
const arrow = ({ from, to }: Import): string => `${from} -> ${to}`;
const told = (list: readonly Import[]): string[] => list.map(arrow);

const betweenRooms = ofCore.filter(({ from, to }) => to.startsWith('core/') && room(to) !== room(from));

/** The way through the house: a room may import those before it. */
const WAY = [
  'quantities',
  'films',
  'network',
  'transfer',
  'stability',
  'integrate',
  'run',
  'studies',
  'exports',
] as const;

/** What may pass from room to room when `from` imports `to`. */
function way(from: string, to: string): 'value' | 'type' | 'shut' {
  const [here, there] = [from, to].map((one) => (WAY as readonly string[]).indexOf(one)) as [number, number];
  // Substances and the document stand beside the way. What loads the document, and what comes after, may know both.
  if (from === 'substances') return to === 'quantities' ? 'value' : 'shut';
  if (from === 'scenario')
    return to === 'films' ? 'type' : ['quantities', 'substances'].includes(to) ? 'value' : 'shut';
  if (to === 'scenario') return from === 'network' ? 'type' : here >= WAY.indexOf('run') ? 'value' : 'shut';
  if (to === 'substances') return here >= WAY.indexOf('run') ? 'value' : 'shut';
  // Integrators know rates of unknowns, not what the unknowns are.
  if (from === 'integrate') return to === 'quantities' ? 'value' : 'shut';
  if (here < 0 || there < 0 || there > here) return 'shut';
  return from === 'exports' && to === 'run' ? 'type' : 'value';
}

/** Values that pass where a type alone should; each with its reason. */
const VALUES_KNOWN: readonly string[] = [
  // A recipe that contradicts itself is a fault of the file, to be told with all the others: the loader asks the film's own check.
  'core/scenario/resolve-recipes.ts -> core/films/loading.ts',
  // The words for the states of a bubble, by their number in a frame: a table of constants.
  'core/exports/run-tables.ts -> core/run/record.ts',
];

describe('the core', () => {
  it('is seen by this test as the compiler sees it: every import of every file', () => {
    expect(ofCore.length).toBeGreaterThan(200);
    for (const file of files) {
      const seen = preProcessFile(readFileSync(file, 'utf8'), true, true).importedFiles.map(({ fileName }) => fileName);
      expect(importsOf(file).map(({ written }) => written)).toEqual(seen);
    }
  });

  it('reaches no page, no Node and no drawing: three libraries and itself', () => {
    const allowed = ['zod', 'ml-matrix', 'odex'];
    expect(told(ofCore.filter(({ to }) => !to.startsWith('core/') && !allowed.includes(to)))).toEqual([]);
  });

  it('has one door to the library that integrates', () => {
    expect(ofCore.filter(({ to }) => to === 'odex').map(({ from }) => from)).toEqual(['core/integrate/odex.js']);
  });

  it('imports against the way of the data, and never along it', () => {
    const wrong = betweenRooms.filter(({ from, to }) => way(room(from), room(to)) === 'shut');
    expect(told(wrong)).toEqual([]);
  });

  it('takes types alone where only a type may pass', () => {
    const values = betweenRooms.filter(
      (one) => way(room(one.from), room(one.to)) === 'type' && !one.typeOnly && !VALUES_KNOWN.includes(arrow(one)),
    );
    expect(told(values)).toEqual([]);
  });

  it('still needs every value that is let through by name', () => {
    const values = betweenRooms.filter(({ typeOnly }) => !typeOnly).map(arrow);
    expect(VALUES_KNOWN.filter((one) => !values.includes(one))).toEqual([]);
  });

  it('has a place on the way for each of its rooms', () => {
    const rooms = new Set(files.filter((path) => path.startsWith('core/')).map(room));
    const placed = [...WAY, 'substances', 'scenario'];
    expect([...rooms].filter((one) => !placed.includes(one))).toEqual([]);
  });

  it('knows no bubble in its integrators', () => {
    const words = files
      .filter((path) => path.startsWith('core/integrate/') && path.endsWith('.ts'))
      .filter((path) => /\b(bubble|film|tension|pressure)[A-Z]/.test(readFileSync(path, 'utf8')));
    expect(words).toEqual([]);
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
