/** What the bench takes from its command line. */
import { describe, expect, it } from 'vitest';
import { readArguments } from './arguments.ts';
import { NAMES } from './targets.ts';

describe('the arguments of the bench', () => {
  it('ask for every problem, three rounds and no peer when there are none', () => {
    expect(readArguments([])).toEqual({
      names: NAMES,
      peers: false,
      peersIn: null,
      peerTimeout: 600,
      repeat: 3,
      tolerance: null,
      calibrate: false,
      json: false,
    });
  });

  it('pick problems by name, and two bubbles through the command as one of them', () => {
    expect(readArguments(['--only', 'cycle-8,two-bubble'])).toMatchObject({ names: ['cycle-8', 'two-bubble'] });
  });

  it('name the problems that do not exist', () => {
    expect(readArguments(['--only', 'cycle-8,foam-3,foam-4'])).toEqual({
      fault: 'no problem is called foam-3, foam-4',
    });
  });

  it.each([
    { words: ['--peers'], peersIn: null, json: false },
    { words: ['--peers', '--json'], peersIn: null, json: true },
    { words: ['--peers', 'there', '--json'], peersIn: 'there', json: true },
    { words: ['--peers=there'], peersIn: 'there', json: false },
  ])('take a directory of peers or none: $words', ({ words, peersIn, json }) => {
    expect(readArguments(words)).toMatchObject({ peers: true, peersIn, json });
  });

  it.each([
    ['--repeat', '0'],
    ['--tolerance', 'small'],
    ['--peer-timeout', '-1'],
  ])('refuse %s %s with the number in the sentence', (name, value) => {
    const asked = readArguments([`${name}=${value}`]);
    expect(asked).toEqual({ fault: `${name} ${value}: a number above 0 is needed` });
  });

  it('refuse an option that does not exist', () => {
    expect(readArguments(['--rounds', '3'])).toHaveProperty('fault');
  });
});
