/** Search among ascending numbers. */

/** The first of ascending numbers that is at least `from`. */
export function firstFrom(ascending: readonly number[], from: number): number | null {
  let [low, high] = [0, ascending.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((ascending[middle] ?? 0) < from) low = middle + 1;
    else high = middle;
  }
  return ascending[low] ?? null;
}

/** The last of ascending numbers that is at most `to`. */
export function lastUpTo(ascending: readonly number[], to: number): number | null {
  let [low, high] = [0, ascending.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((ascending[middle] ?? Infinity) <= to) low = middle + 1;
    else high = middle;
  }
  return ascending[low - 1] ?? null;
}
