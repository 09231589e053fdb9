/** Median of values[from..to), which are put into another order: Hoare's selection. */
export function medianWithin(values: Float64Array, from: number, to: number): number {
  const middle = from + ((to - from) >> 1);
  let low = from;
  let high = to - 1;
  while (low < high) {
    const pivot = values[(low + high) >> 1];
    let i = low;
    let j = high;
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i > j) break;
      const held = values[i];
      values[i++] = values[j];
      values[j--] = held;
    }
    if (middle <= j) high = j;
    else if (middle >= i) low = i;
    else break;
  }
  if ((to - from) % 2 === 1) return values[middle];
  let below = -Infinity;
  for (let i = from; i < middle; i++) if (values[i] > below) below = values[i];
  return 0.5 * (below + values[middle]);
}
