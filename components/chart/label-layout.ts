/** Where words stand so that none covers another. Pure; pixels. */

export type SpreadLabel = { centre: number; size: number }

/**
 * Centres along one axis that keep the given order by place, at least `gap` between neighbours, inside
 * [low, high] where they fit, and moved as little as can be (least squares, by pooling neighbours that press
 * on each other). Answers in the order given. When all together are longer than the space they still do not
 * cover each other and start at `low`.
 */
export function spreadLabels(
  labels: readonly SpreadLabel[],
  gap: number,
  low: number,
  high: number,
): number[] {
  const order = labels
    .map((label, index) => ({ ...label, index }))
    .sort((a, b) => a.centre - b.centre || a.index - b.index)
  const blocks: Block[] = []
  for (const label of order) {
    blocks.push(newBlock(label))
    while (mergeLast(blocks, gap, low, high)) continue
  }
  const centres = new Array<number>(labels.length).fill(0)
  for (const block of blocks) {
    let edge = blockStart(block, gap, low, high)
    for (const label of block.labels) {
      centres[label.index] = edge + label.size / 2
      edge += label.size + gap
    }
  }
  return centres
}

type IndexedLabel = SpreadLabel & { index: number }
type Block = {
  labels: IndexedLabel[]
  /** Sum of where each label would have the block start. */ wishSum: number
  length: number
}

function newBlock(label: IndexedLabel): Block {
  return { labels: [label], wishSum: label.centre - label.size / 2, length: label.size }
}

function blockStart(block: Block, _gap: number, low: number, high: number): number {
  const wish = block.wishSum / block.labels.length
  return Math.max(Math.min(wish, high - block.length), low)
}

function mergeLast(blocks: Block[], gap: number, low: number, high: number): boolean {
  const last = blocks.at(-1)
  const before = blocks.at(-2)
  if (last === undefined || before === undefined) return false
  if (blockStart(before, gap, low, high) + before.length + gap <= blockStart(last, gap, low, high) + 1e-9)
    return false
  const offset = before.length + gap
  before.wishSum += last.wishSum - offset * last.labels.length
  before.length += gap + last.length
  before.labels.push(...last.labels)
  blocks.pop()
  return true
}

export type MarkLabel = { x: number; words: string }
export type PlacedWords = {
  words: string
  /** Left edge. */ left: number
  width: number
  row: number
  /** Where the hairlines stand. */ xs: number[]
}

/**
 * The words of marks on the seam. Each stands centred under its hairline, kept inside [left, right], in the
 * first row where it is free; marks of nearly the same moment share one label. When the rows do not hold
 * them all, the two nearest neighbours become "2 marks", and so on until they do. No two labels cover each
 * other.
 */
export function placeMarks(
  marks: readonly MarkLabel[],
  measure: (words: string) => number,
  space: { left: number; right: number; gap: number; rows: number; togetherPx: number },
): PlacedWords[] {
  const groups = groupMarks(marks, space.togetherPx)
  for (;;) {
    const placed = placeGroups(groups, measure, space)
    if (placed !== null) return placed
    joinNearest(groups)
  }
}

type MarkGroup = { words: string; xs: number[] }

/** Null when some label finds no free row; a single label always has one. */
function placeGroups(
  groups: readonly MarkGroup[],
  measure: (words: string) => number,
  { left, right, gap, rows }: { left: number; right: number; gap: number; rows: number },
): PlacedWords[] | null {
  const placed: PlacedWords[] = []
  const rowEnd = new Array<number>(Math.max(rows, 1)).fill(-Infinity)
  for (const group of groups) {
    const width = measure(group.words)
    const start = Math.max(Math.min(centreOf(group) - width / 2, right - width), left)
    const row = rowEnd.findIndex((end) => start >= end + gap)
    if (row < 0) return null
    placed.push({ words: group.words, left: start, width, row, xs: group.xs })
    rowEnd[row] = start + width
  }
  return placed
}

function groupMarks(marks: readonly MarkLabel[], togetherPx: number): MarkGroup[] {
  const groups: MarkGroup[] = []
  for (const mark of [...marks].sort((a, b) => a.x - b.x)) {
    const last = groups.at(-1)
    if (last !== undefined && mark.x - (last.xs[0] ?? 0) <= togetherPx) {
      last.words = `${last.words}, ${mark.words}`
      last.xs.push(mark.x)
    } else {
      groups.push({ words: mark.words, xs: [mark.x] })
    }
  }
  return groups
}

function joinNearest(groups: MarkGroup[]) {
  let nearest = 0
  let nearestPx = Infinity
  for (let i = 0; i + 1 < groups.length; i += 1) {
    const distance = centreOf(groups[i + 1]) - centreOf(groups[i])
    if (distance < nearestPx) {
      nearest = i
      nearestPx = distance
    }
  }
  const xs = groups.slice(nearest, nearest + 2).flatMap((group) => group.xs)
  groups.splice(nearest, 2, { words: `${xs.length} marks`, xs })
}

function centreOf(group: MarkGroup | undefined): number {
  const xs = group?.xs ?? []
  return xs.reduce((sum, x) => sum + x, 0) / Math.max(xs.length, 1)
}

/** Words cut to a width with an ellipsis; empty when not even two letters fit. */
export function fitWords(words: string, width: number, measure: (words: string) => number): string {
  if (measure(words) <= width) return words
  for (let length = words.length - 1; length >= 2; length -= 1) {
    const cut = `${words.slice(0, length).trimEnd()}…`
    if (measure(cut) <= width) return cut
  }
  return ''
}
