/** Whether the figures show a season at all. */

/** Seasons looked back over: a season that has died out does not count as one. */
const SEASONS = 7;

/**
 * Kruskal & Wallis's rank statistic, "Use of ranks in one-criterion variance analysis", Journal of the American
 * Statistical Association 47 (1952), for the changes from period to period by their position in the season, over its
 * degrees of freedom: about 1 where position says nothing, more where it tells. NaN where there are no changes.
 */
export function seasonEvidence(values: ArrayLike<number>, season: number): number {
  const changes: { value: number; position: number; rank: number }[] = [];
  for (let t = Math.max(1, values.length - SEASONS * season); t < values.length; t++) {
    const value = values[t] - values[t - 1];
    if (!Number.isNaN(value)) changes.push({ value, position: t % season, rank: 0 });
  }
  const n = changes.length;
  changes.sort((a, b) => a.value - b.value);
  for (let from = 0; from < n; ) {
    let to = from;
    while (to < n && changes[to].value === changes[from].value) to++;
    for (let i = from; i < to; i++) changes[i].rank = (from + 1 + to) / 2;
    from = to;
  }
  const middle = (n + 1) / 2;
  let between = 0;
  let groups = 0;
  for (let position = 0; position < season; position++) {
    const ranks = changes.filter((change) => change.position === position).map(({ rank }) => rank);
    if (ranks.length === 0) continue;
    groups++;
    between += ranks.reduce((sum, rank) => sum + rank - middle, 0) ** 2 / ranks.length;
  }
  // The ranks' own variance takes ties into account.
  const variance = changes.reduce((sum, { rank }) => sum + (rank - middle) ** 2, 0) / (n - 1);
  return variance > 0 ? between / variance / (groups - 1) : Number.NaN;
}
