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

/** Parabolas in succession that an excursion is looked for with. */
const MOST_PARABOLAS = 5;

/**
 * A point at which `value` lies beyond zero though it has one sign at a, m and b: what came and went in between. Looked for at the
 * vertex of the parabola through the three, and of those through the vertex and its neighbours, while that could reach zero.
 * @returns null where none is found, where the signs differ, or where a value is no number
 */
export function findExcursion(
  value: (t: number) => number,
  a: number,
  fa: number,
  m: number,
  fm: number,
  b: number,
  fb: number,
): { readonly time: number; readonly value: number } | null {
  if (fa >= 0 !== fm >= 0 || fm >= 0 !== fb >= 0) return null;
  let [x0, f0, x1, f1, x2, f2] = [a, fa, m, fm, b, fb];
  for (let pass = 0; pass < MOST_PARABOLAS; pass++) {
    const d01 = (f1 - f0) / (x1 - x0);
    const curvature = ((f2 - f1) / (x2 - x1) - d01) / (x2 - x0);
    // It must bend away from zero to have its vertex towards it.
    if (!(f1 >= 0 ? curvature > 0 : curvature < 0)) return null;
    const v = 0.5 * (x0 + x1) - d01 / (2 * curvature);
    if (!(v > x0 && v < x2) || v === x1) return null;
    const foreseen = f0 + (v - x0) * (d01 + curvature * (v - x1));
    const nearest = Math.min(Math.abs(f0), Math.abs(f1), Math.abs(f2));
    if (foreseen >= 0 === f1 >= 0 && Math.abs(foreseen) > 0.5 * nearest && pass === 0) return null;
    const fv = value(v);
    if (Number.isNaN(fv)) return null;
    if (fv >= 0 !== f1 >= 0) return { time: v, value: fv };
    if (v < x1) [x2, f2] = [x1, f1];
    else [x0, f0] = [x1, f1];
    [x1, f1] = [v, fv];
  }
  return null;
}
