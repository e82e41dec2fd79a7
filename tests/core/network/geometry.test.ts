/** Volume and area of bubbles, free and mounted, against the sphere that a cap is cut from. */
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { bubbleVolume, capHeight, faceArea } from '../../../core/network/geometry.ts';
import { differenceOf } from './differences.ts';

const mouth = fc.double({ min: -6, max: -1, noNaN: true }).map((exponent) => 10 ** exponent);
/** Height over the mouth's radius, from nearly flat to nearly a full sphere. */
const fullness = fc.double({ min: -3, max: 3, noNaN: true }).map((exponent) => 10 ** exponent);

describe('a free sphere', () => {
  it('of 1 mm radius holds 4.18879 uL under 12.56637 mm2', () => {
    // 4/3 pi and 4 pi to seven digits
    expect(bubbleVolume(0, 1e-3) / 1e-9).toBeCloseTo(4.1887902, 7);
    expect(faceArea(0, 1e-3) / 1e-6).toBeCloseTo(12.5663706, 7);
  });

  it('grows by its area times the step of its radius', () => {
    const { value, error } = differenceOf((R) => bubbleVolume(0, R), 1e-3, 1e-6);
    expect(Math.abs(value - faceArea(0, 1e-3))).toBeLessThan(error);
    expect(error).toBeLessThan(1e-5 * faceArea(0, 1e-3));
  });
});

describe('a cap on a mouth', () => {
  it('at the hemisphere is half a sphere of the radius of the mouth', () => {
    expect(bubbleVolume(2e-3, 2e-3) / bubbleVolume(0, 2e-3)).toBeCloseTo(0.5, 15);
    expect(faceArea(2e-3, 2e-3) / faceArea(0, 2e-3)).toBeCloseTo(0.5, 15);
  });

  it('has the volume and area of the part cut from its sphere of curvature, below and above the hemisphere', () => {
    fc.assert(
      fc.property(mouth, fullness, (a, x) => {
        const h = x * a;
        const R = (a * a + h * h) / (2 * h);
        // pi h^2 (3 R - h)/3 and 2 pi R h of a spherical segment; 3 R - h is never less than half of h. A few roundings.
        expect(Math.abs(bubbleVolume(a, h) / ((Math.PI * h * h * (3 * R - h)) / 3) - 1)).toBeLessThan(4e-15);
        expect(Math.abs(faceArea(a, h) / (2 * Math.PI * R * h) - 1)).toBeLessThan(2e-15);
      }),
      { seed: 1, numRuns: 300 },
    );
  });

  it('nearly flat is a disc, and nearly full a sphere of half its height', () => {
    // Left out: (h/a)^2 of the disc; (a/h)^2 in the sphere's area and three times that in its volume. 1e-8 each.
    expect(Math.abs(faceArea(1e-3, 1e-7) / (Math.PI * 1e-6) - 1)).toBeLessThan(2e-8);
    expect(Math.abs(bubbleVolume(1e-3, 1e-7) / ((Math.PI * 1e-6 * 1e-7) / 2) - 1)).toBeLessThan(2e-8);
    expect(Math.abs(faceArea(1e-7, 1e-3) / faceArea(0, 0.5e-3) - 1)).toBeLessThan(2e-8);
    expect(Math.abs(bubbleVolume(1e-7, 1e-3) / bubbleVolume(0, 0.5e-3) - 1)).toBeLessThan(4e-8);
  });

  it('grows by half its area times the step of its height', () => {
    fc.assert(
      fc.property(mouth, fullness, (a, x) => {
        const { value, error } = differenceOf((h) => bubbleVolume(a, h), x * a, 1e-3 * x * a);
        expect(Math.abs(value - faceArea(a, x * a) / 2)).toBeLessThan(error);
        expect(error).toBeLessThan(1e-5 * faceArea(a, x * a));
      }),
      { seed: 2, numRuns: 100 },
    );
  });

  it('of a given radius of curvature is the larger of the two that have it', () => {
    fc.assert(
      fc.property(
        mouth,
        fullness.filter((x) => x > 1.01),
        (a, x) => {
          const R = (a * a + (x * a) ** 2) / (2 * x * a);
          // R - a is a hundredth of (x - 1)^2 or more, its square root is rounded by 1/(x - 1) at most: 100 EPSILON.
          expect(Math.abs(capHeight(a, R) / (x * a) - 1)).toBeLessThan(3e-14);
          // The smaller cap is the rest of the sphere, x^2 times lower: the difference loses as many digits.
          expect(Math.abs((2 * R - capHeight(a, R)) / (a / x) - 1)).toBeLessThan(3e-14 * (1 + x) ** 2);
        },
      ),
      { seed: 3, numRuns: 300 },
    );
    expect(capHeight(1e-3, 1e-3)).toBe(1e-3);
  });
});
