/**
 * Which of the known names a mistyped one was most likely meant to be.
 * Optimal string alignment distance (Damerau 1964 with each letter moved at most once): a letter added, left out or
 * changed, or two neighbours swapped, each counts one. Case, spaces, hyphens and underscores count nothing.
 */

/** The nearest candidate, or null where none is near: more than a third of its letters would have to change. */
export const nearest = (name: string, candidates: readonly string[]): string | null => {
  const wanted = comparable(name);
  let best: string | null = null;
  let bestDistance = Number.POSITIVE_INFINITY;
  for (const candidate of candidates) {
    const other = comparable(candidate);
    const allowed = Math.floor(Math.max(wanted.length, other.length) / 3);
    // Lengths alone rule most candidates out, which keeps a file of many long names quick.
    if (Math.abs(wanted.length - other.length) > allowed) continue;
    const distance = alignmentDistance(wanted, other);
    if (distance <= allowed && distance < bestDistance) {
      best = candidate;
      bestDistance = distance;
    }
  }
  return best;
};

/** `; did you mean "column"?`, or nothing where no candidate is near. */
export const suggestion = (name: string, candidates: readonly string[]): string => {
  const found = nearest(name, candidates);
  return found === null ? '' : `; did you mean "${found}"?`;
};

const comparable = (name: string): readonly string[] => [
  ...name
    .normalize('NFKC')
    .toLowerCase()
    .replace(/[\s_-]+/gu, '')
    .slice(0, 100),
];

const alignmentDistance = (a: readonly string[], b: readonly string[]): number => {
  let beforeLast: number[] = [];
  let last = Array.from({ length: b.length + 1 }, (_, j) => j);
  for (let i = 1; i <= a.length; i++) {
    const row = [i];
    for (let j = 1; j <= b.length; j++) {
      const changed = last[j - 1] + (a[i - 1] === b[j - 1] ? 0 : 1);
      row[j] = Math.min(changed, last[j] + 1, row[j - 1] + 1);
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1])
        row[j] = Math.min(row[j], beforeLast[j - 2] + 1);
    }
    beforeLast = last;
    last = row;
  }
  return last[b.length];
};
