/**
 * Events are told at the instant where they happen. A lone bubble keeps its gas, so that the vessel's pressure at which its film
 * or its mouth changes is known in closed form, and with it the instant; where it is not, dense frames say between which two.
 */
import { describe, expect, it } from 'vitest';
import type { RunEvent } from '../../../core/run/record.ts';
import { carryThrough, type Carried } from '../../run-scenario.ts';

const RT = 8.314462618 * 298.15;
const FROM = 101325; // Pa
const CLEAN = 0.072; // N/m
const SATURATION = 5e-6; // mol/m^2
const until = 10; // s
const tolerance = 1e-8;
/** The time in which a size that goes from R0 to R by time `when` changes by the run's tolerance: what an instant may err by. */
const slack = (R0: number, R: number, when: number): number => Math.abs((tolerance * when) / Math.log(R / R0));

const film = (rest: object): object => ({
  tension: { law: 'langmuir', clean: CLEAN, saturation: SATURATION, szyszkowski: '0.05 mol/m^3' },
  supply: { kind: 'none' },
  ...rest,
});

/** One free bubble in a vessel whose pressure runs from FROM to `to` in ten seconds. */
function alone(recipe: object, radius: number, faces: number, to: number): readonly RunEvent[] {
  const { events } = carryThrough({
    ambient: { pressure: { wave: 'ramp', from: FROM, to, start: 0, over: until } },
    recipes: { film: recipe },
    nodes: [{ id: 'A', kind: 'bubble', radius, faces, recipe: 'film' }],
    links: [],
    run: { until, frames: 3, tolerance },
  });
  return events;
}

/**
 * When a sphere that keeps its gas has gone from one size to another: p V = n R T gives the outer pressure, and the ramp the time.
 */
function instantAt(faces: number, before: [R: number, gamma: number], then: [R: number, gamma: number], to: number) {
  const [R0, gamma0] = before;
  const [R, gamma] = then;
  const outer = (FROM + (2 * faces * gamma0) / R0) * (R0 / R) ** 3 - (2 * faces * gamma) / R;
  return (until * (outer - FROM)) / (to - FROM);
}

const only = (events: readonly RunEvent[], name: string): RunEvent => {
  const found = events.filter(({ event }) => event === name);
  expect(found).toHaveLength(1);
  return found[0]!;
};

describe('a film with two surface phases, insoluble, attraction 3', () => {
  // Coexistence at theta_lo = 0.07072 and 1 - theta_lo (regular solution, Maxwell construction), here by Newton's method.
  let low = 0.07;
  for (let pass = 0; pass < 50; pass++) {
    const f = Math.log(low / (1 - low)) - 3 * (2 * low - 1);
    low -= f / (1 / (low * (1 - low)) - 6);
  }
  const tension = (theta: number): number => CLEAN + RT * SATURATION * (Math.log1p(-theta) + 3 * theta * theta);
  const [R0, coverage] = [2e-3, 0.95];
  const to = 2000;
  const events = alone(
    film({
      tension: { law: 'frumkin', clean: CLEAN, saturation: SATURATION, szyszkowski: '0.05 mol/m^3', attraction: 3 },
      loading: { coverage },
    }),
    R0,
    2,
    to,
  );
  // Gamma A is constant: R^2 goes with 1/theta.
  const size = (theta: number): number => R0 * Math.sqrt(coverage / theta);
  const when = (theta: number): number => instantAt(2, [R0, tension(coverage)], [size(theta), tension(theta)], to);

  it('splits where the upper of the two coexisting coverages is reached', () => {
    expect(Math.abs(only(events, 'split-begins').time - when(1 - low))).toBeLessThan(
      slack(R0, size(1 - low), when(1 - low)),
    );
  });
  it('is one again where the lower is passed', () => {
    expect(Math.abs(only(events, 'split-ends').time - when(low))).toBeLessThan(slack(R0, size(low), when(low)));
  });
  it('has one tension from the one to the other', () => {
    // What the instant itself may err by: the film changes by some tenths of itself a second.
    expect(Math.abs(only(events, 'split-begins').value / tension(low) - 1)).toBeLessThan(tolerance);
    expect(Math.abs(only(events, 'split-ends').value / tension(low) - 1)).toBeLessThan(tolerance);
  });
});

describe('a closed film that is pressed together past its cmc', () => {
  const [R0, thickness, concentration, cmc, szyszkowski] = [2e-3, 5e-6, 0.2, 0.25, 0.05];
  const recipe = film({
    loading: { concentration },
    supply: { kind: 'closed-film', thickness, transport: 'equilibrium' },
    micelles: { cmc },
  });
  const theta = (c: number): number => c / (c + szyszkowski);
  const tension = (c: number): number => CLEAN + RT * SATURATION * Math.log1p(-theta(c));
  // One face: A Gamma + delta A c, its liquid delta A constant. At the cmc: A = (N - liquid cmc)/Gamma(cmc).
  const area = (c: number): number =>
    (SATURATION * theta(concentration) + (thickness / 2) * (concentration - c)) / (SATURATION * theta(c)); // over the first
  const R = R0 * Math.sqrt(area(cmc));

  it('begins to hold micelles when its liquid reaches the cmc', () => {
    const to = 150_000;
    const event = only(alone(recipe, R0, 2, to), 'micelles-begin');
    const when = instantAt(2, [R0, tension(concentration)], [R, tension(cmc)], to);
    expect(Math.abs(event.time - when)).toBeLessThan(slack(R0, R, when));
    expect(Math.abs(event.value / tension(cmc) - 1)).toBeLessThan(tolerance);
  });
});

describe('a limit', () => {
  it('of tension is told when a hundredth of the clean one is left', () => {
    const [R0, coverage, to] = [2e-3, 0.97, 110_000];
    const gamma = 0.01 * CLEAN;
    const theta = 1 - Math.exp((gamma - CLEAN) / (RT * SATURATION));
    const start = CLEAN + RT * SATURATION * Math.log1p(-coverage);
    const event = only(alone(film({ loading: { coverage } }), R0, 2, to), 'limit-exceeded');
    const R = R0 * Math.sqrt(coverage / theta);
    const when = instantAt(2, [R0, start], [R, gamma], to);
    expect(Math.abs(event.time - when)).toBeLessThan(slack(R0, R, when));
    expect(event.unit).toBe('N/m');
  });

  it('of film thickness is told when 5 nm are left', () => {
    // Nothing is dissolved to speak of in so thin a film; the law is Langmuir's with A Gamma + delta A c constant.
    const [R0, coverage, thickness, szyszkowski, to] = [2e-3, 0.6, 7e-9, 0.05, 60_000];
    const c = (theta: number): number => (szyszkowski * theta) / (1 - theta);
    const held = SATURATION * coverage + (thickness / 2) * c(coverage);
    const ratio = thickness / 5e-9; // of areas
    let [low, high] = [0.01, coverage];
    for (let pass = 0; pass < 200; pass++) {
      const middle = 0.5 * (low + high);
      if (SATURATION * middle * ratio + (thickness / 2) * c(middle) < held) low = middle;
      else high = middle;
    }
    const tension = (theta: number): number => CLEAN + RT * SATURATION * Math.log1p(-theta);
    const recipe = film({
      loading: { coverage },
      supply: { kind: 'closed-film', thickness, transport: 'equilibrium' },
    });
    const event = only(alone(recipe, R0, 2, to), 'limit-exceeded');
    const R = R0 * Math.sqrt(ratio);
    const when = instantAt(2, [R0, tension(coverage)], [R, tension(low)], to);
    expect(Math.abs(event.time - when)).toBeLessThan(slack(R0, R, when));
    expect(event.unit).toBe('m');
  });
});

describe('a mounted bubble in a vessel whose pressure rises and falls again', () => {
  const [mouth, gamma, to] = [1e-3, 0.03, 140_000];
  const { events } = carryThrough({
    ambient: { pressure: { wave: 'table', times: [0, until / 2, until], values: [FROM, to, FROM] } },
    recipes: { bare: { tension: { law: 'constant', clean: gamma } } },
    nodes: [{ id: 'A', kind: 'bubble', height: 1.1 * mouth, mouth: 2 * mouth, recipe: 'bare' }],
    links: [],
    run: { until, frames: 3, tolerance },
  });
  const cap = (h: number): number => (Math.PI * h * (3 * mouth * mouth + h * h)) / 6;
  const excess = (h: number): number => (4 * gamma * h) / (mouth * mouth + h * h);
  // p V is kept: the outer pressure at the hemisphere.
  const outer = ((FROM + excess(1.1 * mouth)) * cap(1.1 * mouth)) / cap(mouth) - excess(mouth);
  const down = ((until / 2) * (outer - FROM)) / (to - FROM);

  it('sinks below the hemisphere of its mouth when that holds its gas', () => {
    const event = only(events, 'mouth-passed');
    expect(Math.abs(event.time - down)).toBeLessThan(slack(1.1, 1, down));
    expect(Math.abs(event.value / mouth - 1)).toBeLessThan(tolerance);
  });
  it('and comes out again at the same pressure', () => {
    expect(Math.abs(only(events, 'mouth-regained').time - (until - down))).toBeLessThan(slack(1.1, 1, down));
  });
});

describe('a valve', () => {
  const { events } = carryThrough({
    recipes: { bare: { tension: { law: 'constant', clean: '30 mN/m' } } },
    nodes: ['A', 'B'].map((id, q) => ({ id, kind: 'bubble', radius: 3e-3 - 1e-4 * q, mouth: '1 mm', recipe: 'bare' })),
    links: [
      { id: 'v', kind: 'tube', from: 'A', to: 'B', bore: '0.1 mm', length: '50 mm', open: [['0 s', '1 s'], ['2.5 s', '4 s']] }, // prettier-ignore
    ],
    run: { until, frames: 1 },
  });

  it('opens and shuts at the instants that were asked for, and what stands open at the start is not told to open', () => {
    expect(events.filter(({ event }) => event.startsWith('valve')).map(({ event, time }) => [event, time])).toEqual([
      ['valve-shut', 1],
      ['valve-opened', 2.5],
      ['valve-shut', 4],
    ]);
  });
  it('makes its pair stand unstable whenever it opens, and no pair at all while it is shut', () => {
    expect(events.filter(({ event }) => event === 'pair-unstable').map(({ time }) => time)).toEqual([0, 2.5]);
  });
});

describe('the instant where a pair turns', () => {
  /** Of the first frame after the event and the last before, the margins; and the margin at the event by the straight line. */
  function aroundTurn({ events, frames }: Carried, name: string, link: string): number {
    const event = events.find((each) => each.event === name && each.link === link)!;
    const after = frames.findIndex(({ time }) => time > event.time);
    const [one, two] = [frames[after - 1]!, frames[after]!];
    expect((one.margin[link]! - 1) * (two.margin[link]! - 1)).toBeLessThan(0);
    const share = (event.time - one.time) / (two.time - one.time);
    return one.margin[link]! + share * (two.margin[link]! - one.margin[link]!);
  }
  const mounted = (id: string, R: number): object => ({ id, kind: 'bubble', radius: R, mouth: '2 mm', recipe: 'film' });

  it('through a cavity is where the margin of dense frames passes 1', () => {
    const carried = carryThrough({
      ambient: { pressure: { wave: 'ramp', from: FROM, to: 40_000, start: 0, over: until } },
      recipes: { film: film({ loading: { coverage: 0.9 } }) },
      nodes: [mounted('A', 3e-3), mounted('B', 3.2e-3), { id: 'M', kind: 'cavity', volume: '0.1 mL', pressure: FROM }],
      links: ['A', 'B'].map((from) => ({ id: from, kind: 'tube', from, to: 'M', bore: '0.5 mm', length: '50 mm' })),
      run: { until, frames: 1000, tolerance },
    });
    // A parabola's sag between frames of a hundredth of a second.
    expect(Math.abs(aroundTurn(carried, 'pair-unstable', 'via:M') - 1)).toBeLessThan(1e-6);
  });

  it('of several gases is where the margin of dense frames passes 1', () => {
    // The slow gas is trapped, and pushes the margin of two bubbles of pure liquid above 1 as they part.
    const carried = carryThrough({
      gases: {
        fast: { molarMass: '44 g/mol', viscosity: '15 uPa*s', diffusivity: 2e-9, solubility: 3.3e-4 },
        slow: { molarMass: '138 g/mol', viscosity: '14 uPa*s', diffusivity: 1e-9, solubility: 1e-9 },
      },
      recipes: { bare: { tension: { law: 'constant', clean: '30 mN/m' } } },
      nodes: ['A', 'B'].map((id, q) => ({
        id,
        kind: 'bubble',
        radius: 120e-6 - 10e-6 * q,
        recipe: 'bare',
        gas: { fast: 0.9983, slow: 0.0017 },
      })),
      links: [{ id: 'f', kind: 'film', from: 'A', to: 'B', area: '1e-8 m^2', thickness: '10 um' }],
      run: { until: 2000, frames: 2000, tolerance },
    });
    expect(carried.events.map(({ event }) => event).slice(0, 2)).toEqual(['pair-unstable', 'pair-stable']);
    expect(Math.abs(aroundTurn(carried, 'pair-stable', 'f') - 1)).toBeLessThan(1e-5);
  });
});
