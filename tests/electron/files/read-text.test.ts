/** What a person is told when a file cannot be read as text. */
import { mkdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { readText } from '../../../electron/files/read-text.ts';
import { scratchDirectory } from '../scratch.ts';

function reading(content: string | Uint8Array): ReturnType<typeof readText> {
  const path = join(scratchDirectory(), 'two.froth.json');
  writeFileSync(path, content);
  return readText(path);
}

describe('reading a file that a person named', () => {
  it('gives its text', () => {
    expect(reading('{ "title": "Größe" }')).toEqual({ ok: true, text: '{ "title": "Größe" }' });
  });

  it('takes a byte order mark off', () => {
    expect(reading('\uFEFF{}')).toEqual({ ok: true, text: '{}' });
  });

  it('says that there is no such file', () => {
    const path = join(scratchDirectory(), 'none.froth.json');
    expect(readText(path)).toEqual({ ok: false, sentence: 'there is no such file' });
  });

  it('says that a directory was named', () => {
    const path = join(scratchDirectory(), 'bank');
    mkdirSync(path);
    expect(readText(path)).toEqual({ ok: false, sentence: 'this is a directory; name the file in it' });
  });

  it('says that the file is empty, or holds nothing to see', () => {
    expect(reading('')).toEqual({ ok: false, sentence: 'the file is empty' });
    expect(reading(' \n\t\n')).toEqual({ ok: false, sentence: 'the file holds nothing but white space' });
  });

  it('names the line of the first byte that is not UTF-8', () => {
    const latin1 = Buffer.concat([Buffer.from('{\n "notes": "gr'), Buffer.of(0xf6), Buffer.from('ne"\n}\n')]);
    expect(reading(latin1)).toEqual({ ok: false, sentence: 'the file is not UTF-8 text (line 2); save it as UTF-8' });
  });

  it('recognises UTF-16', () => {
    const utf16 = Buffer.from('\uFEFF{}', 'utf16le');
    expect(reading(utf16)).toEqual({ ok: false, sentence: 'the file is UTF-16; save it as UTF-8' });
  });
});
