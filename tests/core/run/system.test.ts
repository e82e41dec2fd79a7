/** The network as a system of rates: its balance, its clock, what is switched off, and what counts as an error. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addSource } from '../../../core/run/system.ts';
import { GAS_CONSTANT } from '../../../core/quantities/constants.ts';
import { randomNetwork } from '../transfer/random-documents.ts';
import { linearised, sample, TOLERANCE, type Sample } from '../transfer/sample-networks.ts';

const seeds = fc.nat(2 ** 31);

describe('the rates of a network', () => {
  it('of every gas add up to nothing over nodes and accounts', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        const { system, network, y } = drawn;
        const species = network.species.length;
        const rates = drawn.rates(t);
        // What each node hears is a sum of exact opposites; the sums round by at most an EPSILON of all that flows for each link.
        let flowing = 0;
        const flow = new Float64Array(species);
        let terms = 0;
        for (const { group, kernel } of system.groups) {
          for (let l = 0; l < group.table.count; l++) {
            kernel.flow(group, l, system.state, t, flow);
            for (const one of flow) flowing += 2 * Math.abs(one);
            terms += 2;
          }
        }
        flowing += 1e-8 * network.feeds.length; // each feed drawn is below 2e-9 mol/s
        for (let k = 0; k < species; k++) {
          let sum = 0;
          for (let i = 0; i < network.nodes.count; i++) sum += rates[i * species + k]!;
          expect(Math.abs(sum)).toBeLessThanOrEqual((terms + network.nodes.count) * 2 ** -53 * flowing);
        }
        expect(y.length).toBe(rates.length);
      }),
      { seed: 9, numRuns: 500 },
    );
  });

  it('change in a way that adds up to nothing too: every column of the Jacobian, and the time derivative', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { sample: drawn, t } = randomNetwork(seed);
        const { system, network, y } = drawn;
        const species = network.species.length;
        const { jacobian, timeDerivative } = linearised(system, t, y);
        const columns = [timeDerivative, ...y.map((_, u) => u)].map((column) =>
          typeof column === 'number' ? jacobian.map((row) => row[column]!) : [...column],
        );
        for (const column of columns) {
          const size = column.reduce((sum, one) => sum + Math.abs(one), 0);
          for (let k = 0; k < species; k++) {
            const sum = column.reduce((total, one, u) => (u % species === k ? total + one : total), 0);
            // A link's opposites are exact, and a row that many links share may have cancelled to less than any of them: by as
            // much as ten to one here, over at most thirty links.
            expect(Math.abs(sum)).toBeLessThanOrEqual(300 * 2 ** -53 * size + 1e-30);
          }
        }
      }),
      { seed: 10, numRuns: 100 },
    );
  });

  it('are the same bytes from two systems made of one file, asked for alone or with the Jacobian', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const [one, two] = [randomNetwork(seed), randomNetwork(seed)];
        const alone = one.sample.rates(one.t);
        const { system, y } = two.sample;
        const beside = new Float64Array(system.size);
        system.linearise(two.t, y, beside, new Float64Array(system.size));
        expect([...beside]).toEqual([...alone]);
      }),
      { seed: 11, numRuns: 100 },
    );
  });

  it('are no number at the bubble that holds no gas, which so is named, and the state is refused', () => {
    const { system, y } = pairOnTube();
    y[0] = 0;
    const named = (): number[] => Array.from(rates.keys()).filter((u) => Number.isNaN(rates[u]!));
    const rates = new Float64Array(system.size);
    system.rates(0, y, rates);
    expect(named()).toEqual([0]);
    const derivative = new Float64Array(system.size);
    system.linearise(0, y, rates, derivative);
    expect(named()).toEqual([0]);
    expect(system.rateBound(0, y)).toBeNaN();
    expect(system.evaluate(0, y, false)).toBe(false);
    // And it recovers from it.
    y[0] = 1e-9;
    system.rates(0, y, rates);
    expect([...rates].every(Number.isFinite)).toBe(true);
  });
});

function pairOnTube(): Sample {
  return sample({
    nodes: [
      { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1 } },
      { id: 'B', kind: 'bubble', radius: '0.4 mm', gas: { air: 1 } },
    ],
    links: [{ id: 't', kind: 'tube', from: 'A', to: 'B', bore: '0.1 mm', length: '10 mm' }],
  });
}

describe('accounts', () => {
  it('of a reservoir count what it has given with a minus sign, and have no say in its pressure', () => {
    const fed = sample({
      nodes: [
        { id: 'A', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: { air: 1 } },
        { id: 'S', kind: 'reservoir', pressure: 102000 },
      ],
      links: [{ id: 't', kind: 'tube', from: 'S', to: 'A', bore: '0.1 mm', length: '10 mm' }],
    });
    const flow = fed.flow('t')[0]!;
    expect(flow).toBeGreaterThan(0);
    expect([...fed.rates()]).toEqual([flow, -flow]);
    fed.y[fed.node('S')] = -123;
    expect(fed.rates()[0]).toBe(flow);
  });

  it('of a feed stand on the node outside', () => {
    const fed = sample({
      nodes: [
        {
          id: 'A',
          kind: 'cavity',
          volume: '1 mL',
          pressure: 101325,
          gas: { air: 1 },
          feed: { rate: { wave: 'ramp', from: 0, to: 4e-9, start: 0, over: 4 }, gas: { air: 3, helium: 1 } },
        },
      ],
    });
    // 1e-9 mol/s for each second; three parts of air.
    expect([...fed.rates(2)].map((one) => one / 2e-9)).toEqual([0.75, 0.25, -0.75, -0.25]);
    expect([...linearised(fed.system, 2, fed.y).timeDerivative].map((one) => one / 1e-9)).toEqual([
      0.75, 0.25, -0.75, -0.25,
    ]);
  });
});

describe('the clock', () => {
  const stepped = (): Sample =>
    sample({
      nodes: [
        { id: 'A', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: { air: 1 } },
        {
          id: 'S',
          kind: 'reservoir',
          pressure: { wave: 'square', mean: 101325, amplitude: 100, period: 2, duty: 0.5 },
        },
      ],
      links: [{ id: 't', kind: 'tube', from: 'S', to: 'A', bore: '0.1 mm', length: '10 mm' }],
    });

  it('gives an edge the value after it, and the value before it to a step that ends there', () => {
    const square = stepped();
    expect(square.rates(0.9)[0]).toBeGreaterThan(0);
    expect(square.rates(1)[0]).toBeLessThan(0);
    square.system.segmentEnd = 1;
    expect(square.rates(1)[0]).toBeGreaterThan(0);
    expect(square.rates(0.9)[0]).toBeGreaterThan(0);
  });

  it('gives the bend of a ramp the slope after it, or before it to a step that ends there', () => {
    const ramped = sample({
      nodes: [
        { id: 'A', kind: 'cavity', volume: '1 mL', pressure: 101325, gas: { air: 1 } },
        { id: 'S', kind: 'reservoir', pressure: { wave: 'ramp', from: 101325, to: 101425, start: 0, over: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'S', to: 'A', bore: '0.1 mm', length: '10 mm' }],
    });
    expect(linearised(ramped.system, 1, ramped.y).timeDerivative[0]).toBe(0);
    ramped.system.segmentEnd = 1;
    expect(linearised(ramped.system, 1, ramped.y).timeDerivative[0]).toBeGreaterThan(0);
  });
});

describe('gas handed over by bubbles carried apart', () => {
  it('comes in as the quadratic in time that was asked for, terms for one unknown added up', () => {
    const pair = pairOnTube();
    const before = pair.rates(3);
    pair.system.sources.origin = 1;
    addSource(pair.system.sources, 1, 1e-9, 2e-9, 0);
    addSource(pair.system.sources, 1, 0, 1e-9, 5e-10);
    expect(pair.system.sources.count).toBe(1);
    const rates = pair.rates(3);
    expect(rates[0]).toBe(before[0]);
    // tau = 2: 1e-9 + 2 * 3e-9 + 4 * 5e-10
    expect((rates[1]! - before[1]!) / 9e-9).toBeCloseTo(1, 12);
    const { timeDerivative } = linearised(pair.system, 3, pair.y);
    expect(timeDerivative[1]! / (3e-9 + 2 * 2 * 5e-10)).toBeCloseTo(1, 14);
    expect(timeDerivative[0]).toBe(0);
  });
});

describe('what is switched off', () => {
  const chain = (): Sample =>
    sample({
      nodes: [
        { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1 } },
        {
          id: 'B',
          kind: 'bubble',
          radius: '0.4 mm',
          gas: { air: 1 },
          feed: { rate: 1e-12, gas: { air: 1 } },
        },
        { id: 'C', kind: 'bubble', radius: '0.7 mm', gas: { air: 1 } },
      ],
      links: [
        { id: 'ab', kind: 'tube', from: 'A', to: 'B', bore: '0.1 mm', length: '10 mm' },
        { id: 'bc', kind: 'tube', from: 'B', to: 'C', bore: '0.1 mm', length: '10 mm' },
        { id: 'ac', kind: 'film', from: 'A', to: 'C', area: '0.1 mm^2', thickness: '1 um' },
      ],
    });

  it('a shut valve passes nothing and leaves the other links as they were', () => {
    const open = chain();
    const whole = open.rates();
    const [ab, ac] = [open.flow('ab')[0]!, open.flow('ac')[0]!];
    open.system.setActive(Uint8Array.of(1, 1, 1, 1), [Uint8Array.of(0, 1), Uint8Array.of(1)]);
    const rates = open.rates();
    // Sums of two flows of like size: a rounding of either.
    expect(rates[0]! / -ac).toBeCloseTo(1, 14);
    expect((whole[1]! - rates[1]!) / ab).toBeCloseTo(1, 12);
    expect(rates[2]).toBe(whole[2]);
    const { jacobian } = linearised(open.system, 0, open.y);
    expect(jacobian[0]![1]).toBe(0);
    expect(jacobian[1]![2]).not.toBe(0);
  });

  it('a bubble that is gone keeps its amount, takes its links and its feed with it, and is in nobody’s error', () => {
    const gone = chain();
    gone.y[1] = 0; // as after vanishing: no state to evaluate
    gone.system.setActive(Uint8Array.of(1, 0, 1, 1), [Uint8Array.of(1, 1), Uint8Array.of(1)]);
    const rates = gone.rates();
    const ac = gone.flow('ac')[0]!;
    expect([...rates]).toEqual([-ac, 0, ac, 0]);
    const scale = new Float64Array(gone.system.size);
    gone.system.errorScale(gone.y, scale);
    expect(scale[1]).toBe(Infinity);
    expect(Number.isFinite(scale[0])).toBe(true);
    const { jacobian } = linearised(gone.system, 0, gone.y);
    expect(jacobian.every((row, u) => row[1] === 0 && (u !== 1 || row.every((one) => one === 0)))).toBe(true);
    expect(Number.isFinite(gone.system.rateBound(0, gone.y))).toBe(true);
  });

  it('is back as it was when switched on again', () => {
    const twice = chain();
    const before = twice.rates();
    twice.system.setActive(Uint8Array.of(1, 0, 1, 1), [Uint8Array.of(1, 1), Uint8Array.of(1)]);
    twice.rates();
    twice.system.setActive(Uint8Array.of(1, 1, 1, 1), [Uint8Array.of(1, 1), Uint8Array.of(1)]);
    expect([...twice.rates()]).toEqual([...before]);
  });
});

describe('what counts as one unit of error', () => {
  it('is the tolerance of a bubble’s gas, and of a cavity’s or pool’s pressure against what drives the network', () => {
    const all = sample({
      nodes: [
        { id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1 } },
        { id: 'M', kind: 'cavity', volume: '2 mL', pressure: 101325, gas: { air: 1 } },
        { id: 'W', kind: 'pool', volume: '1 L', gas: { air: 1 } },
        { id: 'S', kind: 'reservoir', pressure: 101325, gas: { air: 1 } },
      ],
      links: [{ id: 't', kind: 'tube', from: 'A', to: 'M', bore: '0.1 mm', length: '10 mm' }],
    });
    const scale = new Float64Array(4);
    all.system.errorScale(all.y, scale);
    const signal = all.start.pressureSignal;
    // One bubble: its capillary pressure 2 gamma/R is the signal.
    const gamma = all.network.films[0]!.cleanTension;
    expect(signal / ((2 * gamma) / 1e-3)).toBeCloseTo(1, 14);
    expect(scale[0]! / (TOLERANCE * all.y[0]!)).toBeCloseTo(1, 14);
    expect(scale[1]! / (TOLERANCE * ((signal * 2e-6) / (GAS_CONSTANT * 298.15)))).toBeCloseTo(1, 14);
    expect(scale[2]! / (TOLERANCE * signal * 7.8e-6 * 1e-3)).toBeCloseTo(1, 14); // H of air, 1 L
    expect(scale[3]).toBe(Infinity);
  });

  it('of a trace in a bubble follows the trace down to a ten-thousandth of the gas, and no further', () => {
    const traced = sample({
      nodes: [{ id: 'A', kind: 'bubble', radius: '1 mm', gas: { air: 1, helium: 1e-2, argon: 1e-9 } }],
    });
    const scale = new Float64Array(3);
    traced.system.errorScale(traced.y, scale);
    const n = traced.y.reduce((sum, one) => sum + one, 0);
    expect(scale[1]! / (TOLERANCE * traced.y[1]!)).toBeCloseTo(1.01, 2);
    expect(scale[2]! / (TOLERANCE * 1e-4 * n)).toBeCloseTo(1, 4);
  });

  it('is above zero for every unknown of every network, so that no division by it can fail', () => {
    fc.assert(
      fc.property(seeds, (seed) => {
        const { sample: drawn } = randomNetwork(seed);
        const scale = new Float64Array(drawn.system.size);
        drawn.system.errorScale(drawn.y, scale);
        expect([...scale].every((one) => one > 0)).toBe(true);
      }),
      { seed: 12, numRuns: 200 },
    );
  });
});
