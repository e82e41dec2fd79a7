/** A network that has come to rest: its rates are rounding noise, which is no reason to follow it in tiny steps. */
import { describe, expect, it } from 'vitest';
import { startRun } from '../../../core/run/drive.ts';
import { carryThrough, scenarioOf } from '../../run-scenario.ts';

/** A large cap of surfactant and a small one of pure liquid, which rest on a supply within a few hundredths of a second. */
const document = {
  recipes: {
    bare: { tension: { law: 'constant', clean: '30 mN/m' } },
    soap: {
      tension: { law: 'langmuir', clean: '72 mN/m', saturation: '5 umol/m^2', szyszkowski: '1 mol/m^3' },
      loading: { coverage: 0.9 },
      supply: { kind: 'none' },
    },
  },
  nodes: [
    { id: 'A', kind: 'bubble', recipe: 'soap', mouth: 0.0006979229517281056, radius: '1 mm' },
    { id: 'B', kind: 'bubble', recipe: 'bare', mouth: 0.0014690184457227587, radius: '1 mm' },
    { id: 'S', kind: 'reservoir', pressure: { wave: 'ramp', from: 101355, to: 101356, start: 0.5, over: 1 } },
  ],
  links: [
    { id: 's', kind: 'tube', from: 'B', to: 'S', bore: '0.5 mm', length: '5 mm' },
    { id: 'f', kind: 'film', from: 'S', to: 'B', area: { share: 0.3 }, thickness: '10 um' },
    { id: 't', kind: 'tube', from: 'A', to: 'B', bore: '0.5 mm', length: '50 mm' },
    { id: 'g', kind: 'film', from: 'A', to: 'B', area: { share: 0.3 }, thickness: '1 um' },
  ],
};

describe('a network at rest', () => {
  for (const tolerance of [1e-6, 1e-8, 1e-10]) {
    it(`is not followed in tiny steps, tolerance ${tolerance}`, () => {
      const run = startRun(scenarioOf({ ...document, run: { until: '1 s', frames: 0, tolerance } }), {
        event: () => undefined,
        frame: () => undefined,
      });
      // Where the method is explicit its steps are held to a multiple of the fastest time, which makes two thousand of this second.
      run.advance(4000);
      expect(run.finished).toBe(true);
      expect(run.result().rejected).toBeLessThan(200);
    });
  }

  it('stays where it is', () => {
    const { frames } = carryThrough({ ...document, run: { until: '0.4 s', frames: 4, method: 'stiff' } });
    const [second, last] = [frames[2]!, frames[4]!];
    // Fourteen digits of a pressure balance.
    for (const id of ['A', 'B']) expect(Math.abs(last.radius[id]! / second.radius[id]! - 1)).toBeLessThan(1e-11);
    expect(Math.abs(last.pressure.A! - 101355)).toBeLessThan(1e-8);
  });
});
