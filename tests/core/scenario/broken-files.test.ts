/** A file broken in any way gets sentences that say what, where and what to do; all of them at once. */
/* eslint-disable @typescript-eslint/no-unsafe-member-access, @typescript-eslint/no-unsafe-assignment, @typescript-eslint/no-unsafe-call -- a file that a test spoils has no type */
import { describe, expect, it } from 'vitest';
import { loadScenario } from '../../../core/scenario/load.ts';
import { faultsOf, manifold, singleBubble, type Spoilable } from './samples.ts';

function spoilt(spoil: (file: Spoilable) => void): Spoilable {
  const file = manifold();
  spoil(file);
  return file;
}

const BREAKS: readonly (readonly [name: string, spoil: (file: Spoilable) => void, sentence: string])[] = [
  [
    'a wrong dimension',
    (file) => (file.nodes[0].radius = '5 mN/m'),
    'nodes[0].radius: "5 mN/m" is a surface tension; a length is needed',
  ],
  [
    'a misspelt key',
    (file) => (file.links[0].bored = '2 mm'),
    'links[0].bored: "bored" is no key of a tube; did you mean "bore"?',
  ],
  [
    'an unknown recipe',
    (file) => (file.nodes[1].recipe = 'saop'),
    'nodes[1].recipe: "saop" is no recipe of this file, nor a built-in one; did you mean "soap"?',
  ],
  [
    'an unknown built-in recipe',
    (file) => (file.nodes[1].recipe = 'sodium-dodecylsulfate'),
    'nodes[1].recipe: "sodium-dodecylsulfate" is no recipe of this file, nor a built-in one; did you mean "sodium-dodecyl-sulfate"?',
  ],
  [
    'an unknown gas',
    (file) => (file.nodes[0].gas = { aire: 1 }),
    'nodes[0].gas.aire: "aire" is no gas of this file, nor a built-in one; did you mean "air"?',
  ],
  [
    'an unknown end',
    (file) => {
      file.nodes[2].id = 'manifold';
      file.links[0].to = file.links[1].to = 'manifold';
      file.links[2].to = 'manifolt';
    },
    'links[2].to: "manifolt" is the id of no node; did you mean "manifold"?',
  ],
  [
    'an id twice',
    (file) => {
      file.nodes[1].id = 'A';
      file.links[1].from = 'A';
      file.links.pop();
    },
    'nodes[1].id: "A" is already the id of nodes[0]; another id is needed',
  ],
  ['a missing key', (file) => delete file.links[0].length, 'links[0].length: missing; a length above 0 is needed'],
  [
    'a unit left out of a text',
    (file) => (file.nodes[0].mouth = '2'),
    'nodes[0].mouth: "2" has no unit; a length is needed, such as "50 um"',
  ],
  [
    'a number without meaning',
    (file) => (file.links[0].bore = '-2 mm'),
    'links[0].bore: "-2 mm" is out of range; a length above 0 is needed',
  ],
  [
    'a coverage of 1',
    (file) => (file.recipes.soap.loading.coverage = 1),
    'recipes.soap.loading.coverage: 1 is out of range; a plain number above 0 and below 1 is needed',
  ],
  [
    'a cap that its mouth cannot hold',
    (file) => (file.nodes[0].mouth = '12 mm'),
    'nodes[0].radius: a radius of 5 mm is below that of its mouth, 6 mm, and no cap has it; a radius of at least 6 mm, or a height, is needed',
  ],
  [
    'a link that cannot stand there',
    (file) => (file.links[3].from = 'M'),
    'links[3]: cannot join a cavity to a pool: a film joins a bubble to a bubble, a reservoir or a pool',
  ],
  [
    'a link to itself',
    (file) => (file.links[4].to = 'A'),
    'links[4].to: joins "A" to itself; two different nodes are needed',
  ],
  [
    'bubbles that overlap on a liquid path',
    (file) => (file.nodes[1].at = ['3 mm', '0 mm']),
    'links[4]: the centres are 3 mm apart and the radii add up to 10 mm; bubbles that are apart, or a film between them, are needed',
  ],
  [
    'a liquid path of no known length',
    (file) => delete file.nodes[1].at,
    'links[4].distance: missing; the distance of the two centres is needed, or "at" on both bubbles',
  ],
  [
    'a key that the law does not use',
    (file) => (file.recipes.soap.tension.law = 'langmuir'),
    'recipes.soap.tension.attraction: "attraction" is no key of a tension of law langmuir; a tension of law langmuir takes law, clean, saturation, szyszkowski, ions',
  ],
  [
    'an unknown word',
    (file) => (file.run.method = 'stif'),
    'run.method: "stif" is not known here; "auto" or "explicit" or "stiff" is needed; did you mean "stiff"?',
  ],
  [
    'an unknown waveform',
    (file) => (file.nodes[3].pressure.wave = 'sinus'),
    'nodes[3].pressure.wave: "sinus" is not known here; "sine" or "square" or "ramp" or "pulses" or "table" is needed; did you mean "sine"?',
  ],
  [
    'a pressure below zero',
    (file) => (file.nodes[3].pressure.mean = '3 Pa'),
    'nodes[3].pressure: falls to -2 Pa; an absolute pressure above 0 is needed at all times',
  ],
  [
    'a gas that lacks what a link needs',
    (file) => delete file.gases.tracer.diffusivity,
    'gases.tracer.diffusivity: missing; needed by link f (film)',
  ],
  [
    'two sizes',
    (file) => (file.nodes[0].diameter = '1 cm'),
    'nodes[0].diameter: given beside radius; only one of radius, diameter and height can be given',
  ],
  [
    'no size',
    (file) => delete file.nodes[0].radius,
    'nodes[0].radius: missing; a radius, a diameter or, on a mouth, a height is needed',
  ],
  [
    'a valve that opens before it shuts',
    (file) =>
      (file.links[0].open = [
        ['0 s', '4 s'],
        ['3 s', '5 s'],
      ]),
    'links[0].open[1]: starts before the span before it has ended; spans in rising order, apart from each other, are needed',
  ],
  [
    'a table out of order',
    (file) => (file.nodes[3].pressure = { wave: 'table', times: [0, 2, 1], values: [1e5, 1e5, 1e5] }),
    'nodes[3].pressure.times: not in rising order; times that rise are needed',
  ],
  [
    'pulses longer than their period',
    (file) => (file.nodes[3].pressure = { wave: 'pulses', base: '1 bar', height: '1 Pa', width: '2 s', period: '1 s' }),
    'nodes[3].pressure.width: 2 s is not below the period of 1 s; a width below the period is needed',
  ],
  [
    'micelles in a film without liquid',
    (file) => {
      file.recipes.soap.supply = { kind: 'none' };
      file.recipes.soap.micelles = { cmc: '8.2 mmol/L' };
    },
    'recipes.soap.micelles: a film without supply has no liquid for micelles; leave micelles out or give a supply of kind "closed-film"',
  ],
  [
    'a film that no tension is left to',
    (file) => (file.recipes.soap.loading.coverage = 0.999999),
    'recipes.soap.loading.coverage: 0.999999; the face would have a tension of -0.09304 N/m there, which no face can have: load less',
  ],
  [
    'a closed film without the constant that its liquid needs',
    (file) => delete file.recipes.soap.tension.szyszkowski,
    'recipes.soap.tension.szyszkowski: missing; a film with a concentration needs a positive one in mol/m^3',
  ],
  [
    'diffusion across the film, not computed yet',
    (file) => (file.recipes.soap.supply.transport = 'diffusing'),
    'recipes.soap.supply.transport: diffusion across the film is not computed by this version yet; use "equilibrium"',
  ],
  [
    'a supply from the bulk, not computed yet',
    (file) => (file.recipes.soap.supply = { kind: 'bulk' }),
    'recipes.soap.supply.kind: a supply from the bulk is not computed by this version yet; use "closed-film" or "none"',
  ],
  [
    'slow micelles, not computed yet',
    (file) => (file.recipes.soap.micelles = { cmc: '8.2 mmol/L', relaxation: '10 ms' }),
    'recipes.soap.micelles.relaxation: micelles that take time are not computed by this version yet; leave relaxation out: micelles then follow at once',
  ],
  [
    'collapse, not computed yet',
    (file) => (file.recipes.soap.collapse = { ceiling: 0.98, respreading: '0.5 s' }),
    'recipes.soap.collapse: collapse of the film is not computed by this version yet; leave collapse out',
  ],
  [
    'packing afresh, not computed yet',
    (file) => (file.run.onVanish = 'repack'),
    'run.onVanish: packing afresh is not computed by this version yet; use "drop" or "join-neighbours"',
  ],
  [
    'a vessel, not computed yet',
    (file) => (file.vessel = { height: '10 cm' }),
    'vessel: a vessel is not computed by this version yet; give nodes and links instead',
  ],
  [
    'a stop at more bubbles than there are',
    (file) => (file.run.untilBubbles = 2),
    'run.untilBubbles: 2 is not below the 2 bubbles of the start; a smaller number is needed',
  ],
  [
    'a bubble above the liquid that it is in',
    (file) => {
      file.ambient = { surfaceHeight: '5 mm' };
      file.nodes[1].faces = 1;
    },
    'nodes[1].at: lies 5 mm above the surface of the liquid; a bubble with one face is inside the liquid: lower it, raise ambient.surfaceHeight, or leave surfaceHeight out',
  ],
  [
    'another format',
    (file) => (file.format = 'sudsmith'),
    'format: "sudsmith" is not known here; "frothwright" is needed',
  ],
];

describe('a scenario file with', () => {
  it('nothing wrong has no faults', () => {
    expect(faultsOf(manifold())).toEqual([]);
  });

  it.each(BREAKS)('%s gets one sentence', (_, spoil, sentence) => {
    expect(faultsOf(spoilt(spoil))).toEqual([sentence]);
  });

  it('a bubble so small that it vanishes at once', () => {
    const file = singleBubble();
    file.nodes[0].radius = '0.5 um';
    expect(faultsOf(file)).toEqual([
      'nodes[0].radius: a radius of 500 nm is not above run.vanishRadius, 1 µm: the bubble would vanish at the start; make it larger or run.vanishRadius smaller',
    ]);
  });

  it('a temperature at which nothing is known of water', () => {
    const file = singleBubble();
    file.temperature = '400 degC';
    expect(faultsOf(file)[0]).toBe(
      'recipes.water.tension.clean: missing; water has no known surface tension at 400 °C, so a surface tension is needed',
    );
  });

  it('every break that does not hide another reports all of them at once', () => {
    const file = spoilt((all) => {
      all.nodes[0].radius = '5 mN/m';
      all.nodes[0].recipe = 'saop';
      all.nodes[0].moth = '2 mm';
      all.nodes[1].kind = 'bubbel';
      all.links[1].to = 'N';
      all.links[2].bore = true;
      all.run = {};
      all.titel = '';
    });
    expect(faultsOf(file)).toEqual([
      'titel: "titel" is no key of a scenario; did you mean "title"?',
      'run.until: missing; a time above 0 is needed',
      'nodes[0].radius: "5 mN/m" is a surface tension; a length is needed',
      'nodes[0].moth: "moth" is no key of a bubble; did you mean "mouth"?',
      'nodes[1].kind: "bubbel" is not known here; "bubble" or "cavity" or "reservoir" or "pool" is needed; did you mean "bubble"?',
      'links[2].bore: true stands here; a length above 0 is needed',
      'nodes[0].recipe: "saop" is no recipe of this file, nor a built-in one; did you mean "soap"?',
      'links[1].to: "N" is the id of no node',
    ]);
  });

  it('the same fault in thousands of places is counted, not repeated', () => {
    const file = singleBubble();
    file.nodes = Array.from({ length: 5000 }, (_, i) => ({ id: `b${i}`, kind: 'bubble', radius: '1 s' }));
    const faults = faultsOf(file);
    expect(faults).toHaveLength(31);
    expect(faults[30]).toBe('nodes[0].radius: "1 s" is a time; a length is needed (and at 4970 more places)');
  });
});

describe('a text that is no JSON', () => {
  it.each([
    [
      '{\n  "format": "frothwright",\n}',
      'line 3, column 1: a comma stands before this closing bracket; take the comma out',
    ],
    ['{\n  // size\n}', 'line 2, column 3: a comment stands here, and JSON has none; put remarks into "notes"'],
    ["{ 'format': 1 }", 'line 1, column 3: single quotes stand here; JSON takes double quotes'],
    ['{ format: 1 }', 'line 1, column 3: "format" stands here without quotes; a key in double quotes is needed'],
    ['{ "until": 10 s }', 'line 1, column 15: "s" stands here; a comma or the closing bracket is needed'],
    ['{ "a": [1, 2 }', 'line 1, column 14: "}" stands here; a comma or the closing bracket is needed'],
    ['{ "a": "b', 'line 1, column 8: a text begins here that is not closed, or holds a character that must be escaped'],
    ['{ "a": 1', 'line 1, column 9: the text ends where a comma or the closing bracket is needed'],
    ['', 'line 1, column 1: the text ends where a value is needed'],
    ['{} {}', 'line 1, column 4: "{" stands here; the end of the file is needed'],
    ['{ "a": .5 }', 'line 1, column 8: ".5" stands here; a value is needed'],
  ])('%j', (text, sentence) => {
    const result = loadScenario(text);
    expect(result.ok ? [] : result.faults.map((fault) => fault.message)).toEqual([sentence]);
  });

  it('holds a key twice, of which JSON would lose the first without a word', () => {
    const text = JSON.stringify(singleBubble()).replace('"radius":', '"radius": "9 mm", "radius":');
    const result = loadScenario(text);
    expect(result.ok ? [] : result.faults.map((fault) => `${fault.path}: ${fault.message}`)).toEqual([
      'nodes[0].radius: "radius" stands twice in one record; take one of them out',
    ]);
  });

  it('is JSON, but no record', () => {
    expect(faultsOf([])).toEqual([': a list stands here; a scenario, as a JSON record, is needed']);
  });
});

describe('a fault', () => {
  it('is a record that a script can read', () => {
    const file = singleBubble();
    file.nodes[0].radius = '5 mN/m';
    const result = loadScenario(JSON.stringify(file));
    expect(result).toEqual({
      ok: false,
      faults: [
        {
          path: 'nodes[0].radius',
          code: 'dimension',
          message: '"5 mN/m" is a surface tension; a length is needed',
          actual: '"5 mN/m"',
          expected: 'a length',
          severity: 'error',
        },
      ],
    });
  });
});
