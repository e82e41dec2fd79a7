/** Random scenario files that are right, for the property tests of this room. */
import fc from 'fast-check';

/** A quantity in several spellings that are the same number in SI. */
interface Spelt {
  readonly plain: number;
  readonly spellings: readonly (string | number)[];
}

function spelt(units: readonly (readonly [unit: string, ten: number])[], least: number, most: number, ten: number) {
  return fc.integer({ min: least, max: most }).map((digits): Spelt => {
    const plain = Number(`${digits}e${ten}`);
    return { plain, spellings: [plain, ...units.map(([unit, shift]) => `${digits}e${ten - shift} ${unit}`)] };
  });
}

const LENGTHS = [
  ['m', 0],
  ['mm', -3],
  ['um', -6],
  ['µm', -6],
  ['cm', -2],
] as const;
const radius = spelt(LENGTHS, 3000, 9000, -6);
const mouth = spelt(LENGTHS, 100, 5000, -6);
const short = spelt(LENGTHS, 1, 9999, -6);
const pressure = spelt(
  [
    ['Pa', 0],
    ['kPa', 3],
    ['mbar', 2],
    ['bar', 5],
  ],
  100_000,
  102_000,
  0,
);
const swing = spelt([['Pa', 0]], 0, 50, 0);
const time = spelt(
  [
    ['s', 0],
    ['ms', -3],
  ],
  1,
  9999,
  -2,
);
const volume = spelt(
  [
    ['m^3', 0],
    ['mL', -6],
    ['cm3', -6],
    ['L', -3],
  ],
  1,
  999,
  -8,
);

/** How a quantity is written: which of its spellings, by turns from a seed. */
export type Writer = (quantity: Spelt) => string | number;
export const plainly: Writer = (quantity) => quantity.plain;
export function variously(seed: number): Writer {
  let state = seed;
  return (quantity) => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return quantity.spellings[state % quantity.spellings.length]!;
  };
}

const wave = fc.oneof(
  pressure.map(
    (value) =>
      (write: Writer): unknown =>
        write(value),
  ),
  fc.tuple(pressure, swing, time).map(([mean, amplitude, period]) => (write: Writer): unknown => ({
    wave: 'sine',
    mean: write(mean),
    amplitude: write(amplitude),
    period: write(period),
  })),
  fc.tuple(pressure, pressure, time, time).map(([from, to, start, over]) => (write: Writer): unknown => ({
    wave: 'ramp',
    from: write(from),
    to: write(to),
    start: write(start),
    over: write(over),
  })),
  fc.tuple(pressure, pressure).map(([one, two]) => (write: Writer): unknown => ({
    wave: 'table',
    times: [0, 1.5],
    values: [write(one), write(two)],
  })),
);

const GASES = ['air', 'helium', 'tracer'];
const composition = fc
  .tuple(
    fc.subarray(GASES, { minLength: 1 }),
    fc.array(fc.integer({ min: 1, max: 97 }), { minLength: 3, maxLength: 3 }),
  )
  .map(([names, weights]) => Object.fromEntries(names.map((name, i) => [name, weights[i]])));

const bubble = fc.record({
  radius,
  mouth: fc.option(mouth),
  recipe: fc.constantFrom('soap', 'skin', 'water', 'sodium-dodecyl-sulfate'),
  faces: fc.constantFrom(1, 2),
  gas: composition,
  at: fc.option(fc.tuple(short, short)),
  wall: fc.boolean(),
});

const bubbles = fc.array(bubble, { minLength: 2, maxLength: 5 });
const sections = fc.record({
  bubbles,
  wave,
  volume,
  pressure,
  length: short,
  bore: short,
  until: time,
  share: fc.boolean(),
});

/** A file as a function of how its quantities are written. */
export const scenarioFiles = sections.map((all) => (write: Writer): unknown => {
  const nodes: unknown[] = all.bubbles.map((one, i) => ({
    id: `b${i}`,
    kind: 'bubble',
    radius: write(one.radius),
    ...(one.mouth === null ? {} : { mouth: write(one.mouth) }),
    faces: one.faces,
    recipe: one.recipe,
    gas: one.gas,
    ...(one.at === null ? {} : { at: one.at.map(write) }),
    ...(one.wall ? { wall: { stiffness: '300 Pa' } } : {}),
  }));
  nodes.push({ id: 'M', kind: 'cavity', volume: write(all.volume), pressure: write(all.pressure), gas: { air: 1 } });
  nodes.push({ id: 'S', kind: 'reservoir', pressure: all.wave(write), gas: { air: 1, helium: 2 } });
  const links: unknown[] = all.bubbles.map((_, i) => ({
    id: `t${i}`,
    kind: 'tube',
    from: `b${i}`,
    to: 'M',
    bore: write(all.bore),
    length: write(all.length),
    ...(i % 2 === 0 ? { open: [[0, write(all.until)]] } : {}),
  }));
  links.push({
    id: 'f',
    kind: 'film',
    from: 'b0',
    to: 'b1',
    area: all.share ? { share: 0.2 } : '1 mm^2',
    thickness: write(all.length),
  });
  links.push({ id: 'l', kind: 'liquid', from: 'b0', to: 'b1', distance: '5 cm' });
  return {
    format: 'frothwright',
    version: 1,
    ambient: { pressure: all.wave(write) },
    gases: { tracer: { molarMass: '138 g/mol', viscosity: '14 uPa*s', diffusivity: 1e-9, solubility: 5e-7 } },
    recipes: {
      soap: {
        tension: { law: 'frumkin', saturation: '4 umol/m^2', szyszkowski: '0.05 mol/m^3', attraction: 0.5 },
        loading: { coverage: 0.7 },
        supply: { kind: 'closed-film', thickness: write(all.length) },
      },
      skin: { tension: { law: 'volmer', saturation: '4 umol/m^2' }, loading: { coverage: 0.5 } },
    },
    nodes,
    links,
    run: { until: write(all.until), frames: 10 },
  };
});
