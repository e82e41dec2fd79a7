/**
 * The nearest known name to a misspelt one, for "did you mean".
 */

const LONGEST = 60;
const MOST_NAMES = 5000;

/** The known name that differs least, by one to three letters as it is long; null where none is near. Case does not count. */
export function nearestName(name: string, known: Iterable<string>): string | null {
  if (name.length === 0 || name.length > LONGEST) return null;
  const wanted = name.toLowerCase();
  let best: string | null = null;
  let least = tolerance(name.length) + 1;
  let looked = 0;
  for (const candidate of known) {
    if (++looked > MOST_NAMES) break;
    if (candidate === name || Math.abs(candidate.length - name.length) >= least) continue;
    const distance = editDistance(wanted, candidate.toLowerCase());
    if (distance < least) {
      least = distance;
      best = candidate;
    }
  }
  return best;
}

function tolerance(length: number): number {
  if (length < 2) return 0;
  return length < 4 ? 1 : length < 12 ? 2 : 3;
}

/** Letters to insert, delete, replace or swap with the next one (optimal string alignment distance). */
export function editDistance(a: string, b: string): number {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const replaced = last[j - 1]! + (a[i - 1] === b[j - 1] ? 0 : 1);
      let cost = Math.min(last[j]! + 1, row[j - 1]! + 1, replaced);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        cost = Math.min(cost, beforeLast[j - 2]! + 1);
      row.push(cost);
    }
    beforeLast = last;
    last = row;
  }
  return last[b.length]!;
}
