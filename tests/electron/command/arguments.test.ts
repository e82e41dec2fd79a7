/** Words in, task out; and for every misuse a sentence that says what to do. */
import { describe, expect, it } from 'vitest';
import { parseArguments } from '../../../electron/command/arguments.ts';

const parse = (line: string) => parseArguments(line === '' ? [] : line.split(' '));

describe('frothwright run', () => {
  it('takes a scenario and a directory, and leaves the rest to the scenario', () => {
    expect(parse('run two.froth.json --out results')).toEqual({
      kind: 'run',
      scenario: 'two.froth.json',
      out: 'results',
      until: null,
      frames: null,
      tables: null,
      quiet: false,
      json: false,
    });
  });

  it('takes every option of the contract, before or after the scenario', () => {
    const task = parseArguments([
      ...['run', '--json', '--until', '2 h', '--frames=50', '--tables', 'pairs,events', '--quiet', '--out', 'r'],
      'two.froth.json',
    ]);
    expect(task).toEqual({
      kind: 'run',
      scenario: 'two.froth.json',
      out: 'r',
      until: 7200,
      frames: 50,
      tables: ['events', 'pairs'],
      quiet: true,
      json: true,
    });
  });

  it('takes a bare number of --until as seconds', () => {
    expect(parse('run a.json --out r --until 90')).toMatchObject({ until: 90 });
  });

  it('takes a file whose name begins with a dash after --', () => {
    expect(parse('run --out r -- -odd.json')).toMatchObject({ kind: 'run', scenario: '-odd.json' });
  });

  it('takes a directory whose name begins with dashes after an equals sign', () => {
    expect(parse('run a.json --out=--odd')).toMatchObject({ kind: 'run', out: '--odd' });
  });
});

describe('the other commands', () => {
  it('check takes a scenario', () => {
    expect(parse('check a.json --json')).toEqual({ kind: 'check', scenario: 'a.json', json: true });
  });
  it('schema takes nothing', () => {
    expect(parse('schema')).toEqual({ kind: 'schema' });
  });
  it('--version and --help need no command', () => {
    expect(parse('--version')).toEqual({ kind: 'version', json: false });
    expect(parse('--help')).toEqual({ kind: 'help', about: null });
    expect(parse('-h')).toEqual({ kind: 'help', about: null });
  });
  it('a command explains itself with --help, whatever else is missing', () => {
    expect(parse('run --help')).toEqual({ kind: 'help', about: 'run' });
    expect(parse('check -h')).toEqual({ kind: 'help', about: 'check' });
  });
});

describe('bad usage', () => {
  it.each([
    ['', /a command is needed: run, check or schema/],
    ['--quiet run a.json', /the command comes first, before --quiet/],
    ['rum a.json', /"rum" is not a command; did you mean run\?/],
    ['simulate a.json', /"simulate" is not a command; run, check and schema are the commands there are/],
    ['fit tension data.csv', /fit comes with a later version/],
    ['causes a.json --out r', /causes comes with a later version/],
    ['study s.json', /study comes with a later version/],
    ['find s.json', /find comes with a later version/],
    ['report r', /report comes with a later version/],
    ['run --out r', /run needs a scenario file/],
    ['run a.json', /run needs --out DIR/],
    ['run a.json b.json --out r', /takes one scenario file; got also "b.json"/],
    ['run a.json --out', /--out needs a value/],
    ['run a.json --out --quiet', /--out needs a value/],
    ['run a.json --out=', /--out needs a value/],
    ['run a.json --out r --out s', /--out is given twice/],
    ['run a.json --out r --quiet=yes', /--quiet takes no value; got "yes"/],
    ['run a.json --out r --untill 3', /no option --untill; did you mean --until\?/],
    ['run a.json --out r -q', /no option -q; it takes --out, --until, --frames, --tables, --quiet, --json, --help/],
    ['run a.json --out r --judge', /--judge comes with a later version/],
    ['run a.json --out r --until soon', /--until: .*soon/],
    ['run a.json --out r --until 5mm', /--until: .*length/],
    ['run a.json --out r --until 0', /--until: .*more than 0/],
    ['run a.json --out r --until=-3', /--until: .*more than 0/],
    ['run a.json --out r --until Infinity', /--until: /],
    ['run a.json --out r --frames=-1', /--frames: "-1" is not a whole number from 0 to 10000000/],
    ['run a.json --out r --frames 10000001', /--frames: "10000001" is not a whole number from 0 to 10000000/],
    ['run a.json --out r --frames 2.5', /--frames: "2.5" is not a whole number/],
    ['run a.json --out r --frames many', /--frames: "many" is not a whole number/],
    ['run a.json --out r --tables event', /--tables: "event" is not a table \(did you mean events\?\)/],
    ['run a.json --out r --tables events,', /--tables: "" is not a table/],
    ['check', /check needs a scenario file/],
    ['check a.json --out r', /check has no option --out/],
    ['schema a.json', /schema takes no file; got "a.json"/],
  ])('frothwright %s', (line, sentence) => {
    expect(parse(line)).toMatchObject({
      kind: 'bad-usage',
      sentence: expect.stringMatching(sentence) as string,
      json: false,
    });
  });

  it('is reported as JSON where --json stands among the words', () => {
    expect(parse('run --json')).toMatchObject({ kind: 'bad-usage', json: true });
  });

  it('is never an exception, whatever the words', () => {
    for (const words of [['run', ''], ['', ''], ['run', '--'], ['-'], ['run', '--out', ''], ['check', '-']]) {
      expect(() => parseArguments(words)).not.toThrow();
    }
  });
});
