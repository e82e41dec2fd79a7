/** "Did you mean": near enough to help, not so far that it misleads. */
import { describe, expect, it } from 'vitest';
import { editDistance, nearestName } from '../../../core/scenario/nearest.ts';

describe('the nearest name', () => {
  it.each([
    ['radios', ['radius', 'diameter'], 'radius'],
    ['raduis', ['radius', 'diameter'], 'radius'],
    ['Radius', ['radius', 'diameter'], 'radius'],
    ['lenght', ['length', 'bore'], 'length'],
    ['attraction', ['saturation', 'clean'], null],
    ['N', ['A', 'B'], null],
    ['a', ['A', 'B'], 'A'],
    ['', ['A'], null],
    ['sodium-dodecylsulphate', ['sodium-dodecyl-sulfate'], 'sodium-dodecyl-sulfate'],
  ])('to %j among %j is %j', (name, known, near) => {
    expect(nearestName(name, known)).toBe(near);
  });

  it('counts a swap of two letters as one slip', () => {
    expect(editDistance('raduis', 'radius')).toBe(1);
    expect(editDistance('kitten', 'sitting')).toBe(3);
    expect(editDistance('', 'abc')).toBe(3);
  });
});
