/** Finds the instant at which a quantity of the dense output passes through zero. */

/**
 * Root of `value` between a and b, where it has opposite signs (or is zero at b), by the Illinois form of regula falsi.
 * @param fa,fb value at a and b
 * @param precision length of the bracket at which to stop, s
 * @returns the end of the last bracket on b's side, where the sign is that of fb
 */
export function findPassage(
  value: (t: number) => number,
  a: number,
  fa: number,
  b: number,
  fb: number,
  precision: number,
): number {
  let [low, high, fl, fh] = [a, b, fa, fb];
  let side = 0;
  for (let pass = 0; pass < 100 && high - low > precision; pass++) {
    let t = (fl * high - fh * low) / (fl - fh);
    // Every fourth pass bisects: the bracket shrinks whatever the shape.
    if (!(t > low && t < high) || pass % 4 === 3) t = 0.5 * (low + high);
    const f = value(t);
    if (!Number.isFinite(f) || t === low || t === high) break;
    if (f >= 0 === fb >= 0) {
      high = t;
      fh = f;
      if (side === 1) fl *= 0.5;
      side = 1;
      if (f === 0) break;
    } else {
      low = t;
      fl = f;
      if (side === -1) fh *= 0.5;
      side = -1;
    }
  }
  return high;
}
