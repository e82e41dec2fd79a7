/** The finder of faults in JSON texts must agree with the reader of JSON texts. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { scanJson } from '../../../core/scenario/json-text.ts';

function isJson(text: string): boolean {
  try {
    JSON.parse(text);
    return true;
  } catch {
    return false;
  }
}

const fragments = fc.constantFrom(
  ...[
    '{',
    '}',
    '[',
    ']',
    ',',
    ':',
    '"a"',
    '"',
    '1',
    '-',
    '0',
    '.5',
    '1.5',
    'e3',
    '1e3',
    'true',
    'null',
    'nul',
    ' ',
    '\n',
  ],
  ...['"\\u00e9"', '"\\x"', '\t', '01', '//', "'a'"],
);

describe('the scan of a text', () => {
  it('finds a fault exactly where JSON.parse refuses: pieces of JSON in any order', () => {
    fc.assert(
      fc.property(fc.array(fragments, { maxLength: 8 }), (parts) => {
        const text = parts.join('');
        expect(scanJson(text).syntax === null).toBe(isJson(text));
      }),
      { numRuns: 3000 },
    );
  });

  it('finds a fault exactly where JSON.parse refuses: JSON with a letter changed', () => {
    fc.assert(
      fc.property(fc.json(), fc.nat(), fc.string({ minLength: 0, maxLength: 1 }), (json, at, by) => {
        const place = at % (json.length + 1);
        const text = json.slice(0, place) + by + json.slice(place + 1);
        expect(scanJson(text).syntax === null).toBe(isJson(text));
      }),
      { numRuns: 1000 },
    );
  });

  it('counts lines whatever ends them', () => {
    expect(scanJson('{\r\n"a": 1,\r\n"b" 2}').syntax).toMatchObject({ line: 3, column: 5 });
    expect(scanJson('{\n"a": 1,\n"b" 2}').syntax).toMatchObject({ line: 3, column: 5 });
  });

  it('names the place of a key that stands twice', () => {
    const { duplicates } = scanJson('{"nodes": [{}, {"id": "A", "at": [1, 2], "id": "B"}]}');
    expect(duplicates).toEqual([{ path: 'nodes[1].id', key: 'id' }]);
  });

  it('sees that an escaped key is the same key', () => {
    expect(scanJson('{"a": 1, "\\u0061": 2}').duplicates).toHaveLength(1);
  });
});
