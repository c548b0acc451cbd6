/** Index of the last item whose key is at or below `value` in a list that rises by key; -1 when there is none. */
export const lastAtOrBelow = <T>(items: readonly T[], key: (item: T) => number, value: number): number => {
  let low = 0
  let high = items.length
  while (low < high) {
    const middle = (low + high) >>> 1
    if (key(items[middle] as T) <= value) low = middle + 1
    else high = middle
  }
  return low - 1
}
