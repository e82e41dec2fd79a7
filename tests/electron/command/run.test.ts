/** What `frothwright run` does around the solver: files, words and exit statuses, whatever the solver does. */
import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { ScenarioFault } from '../../../core/run/faults.ts';
import type { RunTask } from '../../../electron/command/arguments.ts';
import { executeRun } from '../../../electron/command/run.ts';
import { scratchDirectory } from '../scratch.ts';
import type { FakePlan } from './fake-run.ts';
import { fakeRun } from './fake-run.ts';
import type { FakeTerminal } from './fake-terminal.ts';
import { fakeTerminal } from './fake-terminal.ts';
import { TWO_BUBBLES } from './two-bubbles.ts';

const FILES = ['bubbles.csv', 'events.csv', 'pairs.csv', 'scenario.froth.json', 'series.csv', 'summary.json'];

interface Trial {
  readonly task: RunTask;
  readonly terminal: FakeTerminal;
  readonly out: string;
}

function trial(options: Partial<RunTask> = {}, screen = false, tick = 1): Trial {
  const directory = scratchDirectory();
  const scenario = join(directory, 'two.froth.json');
  writeFileSync(scenario, JSON.stringify(TWO_BUBBLES));
  const out = join(directory, 'results');
  const task: RunTask = {
    ...{ kind: 'run', scenario, out, until: null, frames: null, tables: null, quiet: false, json: false },
    ...options,
  };
  return { task, terminal: fakeTerminal(screen, tick), out: task.out };
}

function execute({ task, terminal }: Trial, plan: FakePlan): Promise<number> {
  return executeRun(task, { terminal, version: '1.2.3', startRun: fakeRun(plan) });
}

function read(out: string, name: string): string {
  return readFileSync(join(out, name), 'utf8');
}

function summary(out: string): Record<string, unknown> {
  return JSON.parse(read(out, 'summary.json')) as Record<string, unknown>;
}

describe('a run that comes to its end', () => {
  it('leaves exactly the files of the contract and exit status 0', async () => {
    const it = trial();
    expect(await execute(it, { steps: 5 })).toBe(0);
    expect(readdirSync(it.out).sort()).toEqual(FILES);
  });

  it('is silent where no person looks', async () => {
    const it = trial();
    await execute(it, { steps: 5 });
    expect(it.terminal.said()).toEqual({ out: '', err: '' });
  });

  it('tells a person at a terminal what happened and where the files are', async () => {
    const it = trial({}, true);
    await execute(it, { steps: 5 });
    expect(it.terminal.said().out).toContain('Ran to 5 s');
    expect(it.terminal.said().out).toContain('2 bubbles are left');
    expect(it.terminal.said().out).toContain(it.out);
  });

  it('is silent at a terminal too with --quiet', async () => {
    const it = trial({ quiet: true }, true, 100);
    await execute(it, { steps: 500 });
    expect(it.terminal.said()).toEqual({ out: '', err: '' });
  });

  it('shows its progress on a terminal and wipes it in the end', async () => {
    const it = trial({}, true, 100);
    await execute(it, { steps: 500 });
    const lines = it.terminal.said().err.split('\r\u001b[K');
    expect(lines.at(-2)).toMatch(/^100 % {2}8.33 min of 8.333 min {2}.* a second {2}0:00 left$/);
    expect(lines.at(-1)).toBe('');
  });

  it('writes how it went', async () => {
    const it = trial();
    await execute(it, { steps: 5 });
    expect(summary(it.out)).toMatchObject({
      program: 'frothwright',
      version: '1.2.3',
      scenario: {
        title: TWO_BUBBLES.title,
        file: 'two.froth.json',
        sha256: expect.stringMatching(/^[0-9a-f]{64}$/) as string,
      },
      endTime_s: 5,
      stop: { kind: 'done' },
      method: 'stiff',
      steps: 5,
      rejected: 0,
      rateEvaluations: 5,
      bubblesLeft: 2,
      events: { 'run-ended': 1 },
      gasBalance: 1e-16,
      surfactantBalance: 0,
      criteria: [{ measure: 'pair-margin', verdict: 'not judged', sentence: expect.any(String) as string }],
      tables: { 'events.csv': 1, 'series.csv': 6, 'bubbles.csv': 12, 'pairs.csv': 12 },
    });
  });

  it('prints the summary on standard output with --json', async () => {
    const it = trial({ json: true });
    await execute(it, { steps: 5 });
    expect(it.terminal.said().out).toBe(read(it.out, 'summary.json'));
  });

  it('writes the scenario as run, with the end and the frames of the command line', async () => {
    const it = trial({ until: 42, frames: 7 });
    await execute(it, { steps: 5 });
    const written = JSON.parse(read(it.out, 'scenario.froth.json')) as { run: { until: unknown; frames: unknown } };
    expect(written.run).toMatchObject({ until: 42, frames: 7 });
  });

  it('has another hash when it ran with other settings', async () => {
    const [one, other] = [trial(), trial({ until: 42 })];
    await execute(one, { steps: 5 });
    await execute(other, { steps: 5 });
    expect(summary(one.out).scenario).not.toEqual(summary(other.out).scenario);
  });

  it('says in the summary which tables were not asked for', async () => {
    const it = trial({ tables: ['events'] });
    await execute(it, { steps: 5 });
    expect(readdirSync(it.out).sort()).toEqual(['events.csv', 'scenario.froth.json', 'summary.json']);
    expect(summary(it.out).tables).toMatchObject({ 'pairs.csv': 'not written: not asked for by --tables' });
  });
});

describe('a run that the solver cannot finish', () => {
  it('keeps what was computed, says why in three places, and exits with 3', async () => {
    const it = trial();
    expect(await execute(it, { steps: 5, failAt: 3 })).toBe(3);
    expect(it.terminal.said().err).toMatch(/^Bubble B cannot go on at 3 s: its film is gone\. .* is in /);
    expect(summary(it.out)).toMatchObject({ endTime_s: 3, stop: { kind: 'failed', node: 'B', time: 3 } });
    expect(read(it.out, 'events.csv').trimEnd().split('\n').at(-1)).toMatch(/^3,run-ended,.*Bubble B cannot go on/);
    expect(read(it.out, 'series.csv').trimEnd().split('\n')).toHaveLength(1 + 4);
  });
});

describe('Ctrl-C', () => {
  it('keeps what was computed and exits with 130', async () => {
    const it = trial();
    const onStep = (step: number): void => {
      if (step === 20) it.terminal.pressInterrupt();
    };
    expect(await execute(it, { steps: 1e9, onStep })).toBe(130);
    expect(readdirSync(it.out).sort()).toEqual(FILES);
    expect(summary(it.out)).toMatchObject({ stop: { kind: 'interrupted' } });
    expect(it.terminal.said().err).toMatch(/^Stopped at .* what was computed is in /);
  });

  it('pressed twice quits at once and keeps nothing', async () => {
    const it = trial();
    const seen: { status: number | null; left: string[] }[] = [];
    const onStep = (step: number): void => {
      if (step !== 20) return;
      it.terminal.pressInterrupt();
      it.terminal.pressInterrupt();
      seen.push({ status: it.terminal.quitStatus(), left: readdirSync(join(it.out, '..')) });
      throw new Error('the process would be gone here');
    };
    await expect(execute(it, { steps: 1e9, onStep })).rejects.toThrow('would be gone');
    expect(seen).toEqual([{ status: 130, left: ['two.froth.json'] }]);
  });

  it('is left to the shell again after the run', async () => {
    const it = trial();
    await execute(it, { steps: 5 });
    it.terminal.pressInterrupt();
    it.terminal.pressInterrupt();
    expect(it.terminal.quitStatus()).toBeNull();
  });
});

describe('a run that must not leave files', () => {
  it('is one that the solver refuses to start: exit status 2 and its faults', async () => {
    const it = trial();
    const startRun = (): never => {
      throw new ScenarioFault([
        {
          path: 'nodes[0].radius',
          code: 'too-large',
          message: 'cannot be',
          actual: '1',
          expected: '',
          severity: 'error',
        },
      ]);
    };
    expect(await executeRun(it.task, { terminal: it.terminal, version: '', startRun })).toBe(2);
    expect(it.terminal.said().err).toBe('nodes[0].radius: cannot be\n');
    expect(readdirSync(join(it.out, '..'))).toEqual(['two.froth.json']);
  });

  it('is one that breaks down inside: the exception goes on, an older result stays', async () => {
    const it = trial();
    await execute(it, { steps: 5 });
    const before = FILES.map((name) => read(it.out, name));
    const onStep = (step: number): void => {
      if (step === 3) throw new Error('broken inside');
    };
    await expect(execute(it, { steps: 5, onStep })).rejects.toThrow('broken inside');
    expect(readdirSync(it.out).sort()).toEqual(FILES);
    expect(FILES.map((name) => read(it.out, name))).toEqual(before);
  });

  it('is one whose directory is a file: exit status 2 and a sentence', async () => {
    const it = trial();
    writeFileSync(it.out, '');
    expect(await execute(it, { steps: 5 })).toBe(2);
    expect(it.terminal.said().err).toBe(`${it.out}: this, or a part of its path, is a file; a directory is needed\n`);
  });

  it('is one whose scenario is not there: exit status 2 and a sentence that names the file', async () => {
    const it = trial({ scenario: join(scratchDirectory(), 'none.froth.json') });
    expect(await execute(it, { steps: 5 })).toBe(2);
    expect(it.terminal.said().err).toBe('none.froth.json: there is no such file\n');
  });

  it('gives the same faults as one JSON document with --json', async () => {
    const it = trial({ scenario: join(scratchDirectory(), 'none.froth.json'), json: true });
    expect(await execute(it, { steps: 5 })).toBe(2);
    expect(JSON.parse(it.terminal.said().out)).toMatchObject({
      ok: false,
      faults: [{ path: '', code: 'file', message: 'there is no such file', severity: 'error' }],
    });
    expect(it.terminal.said().err).toBe('');
  });
});
