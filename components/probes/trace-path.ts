/** An SVG path through points; null is a gap, so the next point begins anew. */
export function tracePath(points: readonly ({ x: number; y: number } | null)[]): string {
  return points
    .map((point, index) => {
      if (point === null) return ''
      const isAfterGap = (points[index - 1] ?? null) === null
      return `${isAfterGap ? 'M' : 'L'}${point.x.toFixed(1)} ${point.y.toFixed(1)}`
    })
    .join('')
}
