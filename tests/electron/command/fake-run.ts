/** A run that does what a test tells it, in place of the solver. */
import type { Run } from '../../../core/run/drive.ts';
import type { EventName, RunObserver, RunResult, RunStop } from '../../../core/run/record.ts';
import { sampleFrame } from '../../core/exports/sample-frame.ts';

export interface FakePlan {
  /** Steps of one second each. */
  readonly steps: number;
  /** At this step the solver fails. */
  readonly failAt?: number;
  /** Called before each step with its number. */
  readonly onStep?: (step: number) => void;
}

/** A factory of runs with a frame a step and `run-ended` at the end. */
export function fakeRun(plan: FakePlan): (scenario: unknown, observer: RunObserver) => Run {
  return (_scenario, observer) => {
    let time = 0;
    let stop: RunStop | null = null;
    const counts: Partial<Record<EventName, number>> = {};
    const frame = (): void => observer.frame(sampleFrame(time, ['A', 'B']));

    function end(how: RunStop): void {
      stop = how;
      counts['run-ended'] = 1;
      const detail = how.kind === 'failed' ? how.sentence : how.kind;
      observer.event({ time, event: 'run-ended', subject: '', partner: '', link: '', value: NaN, unit: '', detail });
    }

    frame();
    return {
      get time() {
        return time;
      },
      until: plan.steps,
      get progress() {
        return time / plan.steps;
      },
      get finished() {
        return stop !== null;
      },
      advance(steps) {
        for (let step = 0; step < steps && stop === null; step += 1) {
          plan.onStep?.(time);
          if (time === plan.failAt) {
            end({ kind: 'failed', sentence: 'Bubble B cannot go on at 3 s: its film is gone.', node: 'B', time });
            return;
          }
          time += 1;
          frame();
          if (time === plan.steps) end({ kind: 'done' });
        }
      },
      radiiAt: () => new Float64Array(0),
      interrupt() {
        end({ kind: 'interrupted' });
      },
      result(): RunResult {
        return {
          stop: stop!,
          endTime: time,
          method: 'stiff',
          steps: time,
          rejected: 0,
          rateEvaluations: time,
          eventCounts: counts,
          worstGasBalance: 1e-16,
          worstSurfactantBalance: 0,
          bubblesLeft: 2,
          warnings: [],
        };
      },
    };
  };
}
