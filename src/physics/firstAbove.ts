/** Index of the first of ascending `values` above `value`. */
export function firstAbove(values: Float64Array, value: number): number {
  let low = 0
  let high = values.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (values[middle] > value) high = middle
    else low = middle + 1
  }
  return low
}
