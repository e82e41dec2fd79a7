/** Mounted caps and walls: what their pressure is made of, against Young and Laplace and the law of the wall. */
import { describe, expect, it } from 'vitest';
import { sample } from '../transfer/sample-networks.ts';
import { AMBIENT, bubble, shapeOf } from './sample-bubbles.ts';

describe('the capillary pressure of a cap', () => {
  const a = 1e-3;
  const over = (height: number, faces: 1 | 2 = 1): number => {
    const { system, y } = bubble({ size: height, mouth: a, faces, gamma: 0.072 });
    system.evaluate(0, y, false);
    return system.state.pressure[0]! - AMBIENT;
  };

  it('at the hemisphere is that of a sphere of the radius of the mouth: 144 Pa at 72 mN/m and 1 mm', () => {
    // Pressures near 1e5 Pa are rounded at 1.5e-11 Pa.
    expect(Math.abs(over(a) - 144)).toBeLessThan(5e-11);
    expect(Math.abs(over(a, 2) - 288)).toBeLessThan(5e-11);
  });

  it('is 4 f gamma h/(a^2 + h^2), the same for the cap and the rest of its sphere', () => {
    // h = a/2 and h = 2 a: both 4 * 0.072 * 0.4/1e-3 = 115.2 Pa.
    expect(Math.abs(over(a / 2) - 115.2)).toBeLessThan(5e-11);
    expect(Math.abs(over(2 * a) - 115.2)).toBeLessThan(5e-11);
    expect(Math.abs(over(a / 2, 2) - 230.4)).toBeLessThan(5e-11);
  });

  it('is greatest at the hemisphere: below it blowing the cap up raises the pressure, above it lowers it', () => {
    const u = (height: number): number => {
      const { system, y } = bubble({ size: height, mouth: a, gamma: 0.072 });
      system.evaluate(0, y, true);
      return system.state.stiffness[0]!;
    };
    for (const share of [0.01, 0.3, 0.9, 0.99]) expect(u(share * a)).toBeGreaterThan(0);
    for (const share of [1.01, 1.1, 3, 100]) expect(u(share * a)).toBeLessThan(0);
    // Against the stiffness of the cap at half the height; what is left is the rounding of a^2 - h^2.
    expect(Math.abs(u(a))).toBeLessThan(1e-14 * u(a / 2));
  });

  it('of a bubble far larger than its mouth is that of a free sphere', () => {
    const [mounted, free] = [
      bubble({ size: 2e-3, mouth: 1e-7, gamma: 0.072 }),
      bubble({ size: 1e-3, mouth: 0, gamma: 0.072 }),
    ];
    for (const { system, y } of [mounted, free]) system.evaluate(0, y, true);
    // Left out: (a/h)^2 = 2.5e-9 of the curvature, three times that of the volume.
    const near = (of: 'radius' | 'stiffness' | 'radiusSlope'): number =>
      mounted.system.state[of][0]! / free.system.state[of][0]! - 1;
    expect(Math.abs(near('radius'))).toBeLessThan(1e-8);
    expect(Math.abs(near('stiffness'))).toBeLessThan(3e-8);
    expect(Math.abs(near('radiusSlope'))).toBeLessThan(3e-8);
  });
});

describe('a mounted bubble given by its radius of curvature', () => {
  it('stands on the larger of the two caps, and at the radius of the mouth on the hemisphere', () => {
    const height = (radius: number): number =>
      sample({ nodes: [{ id: 'A', kind: 'bubble', radius, mouth: 2e-3, gas: { air: 1 } }] }).start.sizes[0]!;
    expect(height(1e-3)).toBe(1e-3);
    // R = (a^2 + h^2)/(2 h): h = 2 a gives 1.25 a.
    expect(Math.abs(height(1.25e-3) / 2e-3 - 1)).toBeLessThan(1e-15);
  });
});

describe('the wall', () => {
  for (const [what, mouth] of [
    ['a free bubble', 0],
    ['a mounted one', 0.6e-3],
  ] as const) {
    it(`of ${what} carries nothing at its rest, its stiffness at twice the volume, and pulls below rest`, () => {
      const over = (size: number, wall: readonly [number, number] | null): number => {
        const { system, y } = bubble({ size, mouth, gamma: 0.04, wall });
        system.evaluate(0, y, false);
        return system.state.pressure[0]!;
      };
      const rest = 1e-3;
      // The size that holds twice the volume, by bisection.
      let [low, high] = [rest, 2 * rest];
      while (high - low > 1e-18) {
        const middle = (low + high) / 2;
        if (middle === low || middle === high) break;
        if (shapeOf(mouth, middle).volume < 2 * shapeOf(mouth, rest).volume) low = middle;
        else high = middle;
      }
      // Differences of pressures near 1e5 Pa, rounded at 1.5e-11 Pa a few times.
      expect(Math.abs(over(rest, [300, rest]) - over(rest, null))).toBeLessThan(5e-11);
      expect(Math.abs(over(high, [300, rest]) - over(high, null) - 300)).toBeLessThan(5e-11);
      expect(over(0.9 * rest, [300, rest])).toBeLessThan(over(0.9 * rest, null));
    });
  }

  it('makes up for a film without elasticity: a sphere stands firm once K_w passes a third of the capillary pressure', () => {
    // V dp/dV at rest: K_w - (2 f gamma/R)/3.
    const capillary = (2 * 0.04) / 1e-3;
    const u = (stiffness: number): number => {
      const { system, y } = bubble({ size: 1e-3, mouth: 0, gamma: 0.04, wall: [stiffness, 1e-3] });
      system.evaluate(0, y, true);
      return system.state.stiffness[0]!;
    };
    expect(u(0.999 * (capillary / 3))).toBeLessThan(0);
    expect(u(1.001 * (capillary / 3))).toBeGreaterThan(0);
  });
});
