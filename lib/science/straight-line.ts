/**
 * The value at `x` of the straight line through two points, in the values' unit: y₁ + (x − x₁)/(x₂ − x₁)·(y₂ − y₁).
 * Every curve of the product is straight between its points, and every one is read here. Beyond the points the line goes
 * on; NaN when the points share their x or a value is NaN.
 */
export function straightBetween(fromX: number, fromY: number, toX: number, toY: number, x: number): number {
  return fromY + ((x - fromX) / (toX - fromX)) * (toY - fromY)
}

/**
 * Index of the last of rising `xs` at or before `x`, by halving; −1 when the first lies after it or there is none.
 * Of equal ones the last.
 */
export function lastIndexAtOrBefore(xs: ArrayLike<number>, x: number): number {
  let low = -1
  let high = xs.length
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if ((xs[middle] ?? NaN) <= x) low = middle
    else high = middle
  }
  return low
}

/**
 * Value of a line at `x`, straight between its points, at a step the value after it; NaN outside it and beside a NaN (a
 * gap).
 *
 * @param xs never falling
 * @param ys as long as `xs`
 */
export function valueAt(xs: ArrayLike<number>, ys: ArrayLike<number>, x: number): number {
  const before = lastIndexAtOrBefore(xs, x)
  if (before < 0) return NaN
  const fromX = xs[before] ?? NaN
  const fromY = ys[before] ?? NaN
  if (x === fromX) return fromY
  if (before === xs.length - 1) return NaN
  return straightBetween(fromX, fromY, xs[before + 1] ?? NaN, ys[before + 1] ?? NaN, x)
}
