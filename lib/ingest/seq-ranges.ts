/**
 * Sets of sequence numbers as sorted, disjoint, never touching half-open ranges, flat: [from, until, from, until …].
 * The same set as PostgreSQL's canonical int8multirange. Pure; nothing here changes its argument.
 */
export type SeqRanges = readonly number[]

/** Reads PostgreSQL's text of an int8multirange: `{[1,5),[7,9)}`. */
export function parseSeqRanges(text: string): number[] {
  const bounds: number[] = []
  for (const [, from, until] of text.matchAll(/\[(\d+),(\d+)\)/g)) bounds.push(Number(from), Number(until))
  return bounds
}

/** Writes PostgreSQL's text of an int8multirange. */
export function printSeqRanges(ranges: SeqRanges): string {
  const parts: string[] = []
  for (let i = 0; i < ranges.length; i += 2) parts.push(`[${ranges[i]},${ranges[i + 1]})`)
  return `{${parts.join(',')}}`
}

/** True when `seq` lies in one of the ranges; by bisection. */
export function hasSeq(ranges: SeqRanges, seq: number): boolean {
  let low = 0
  let high = ranges.length
  // The count of bounds at or below seq: odd inside a range, even outside.
  while (low < high) {
    const middle = (low + high) >> 1
    if ((ranges[middle] ?? Infinity) <= seq) low = middle + 1
    else high = middle
  }
  return low % 2 === 1
}

/** The highest number in the set; -1 for an empty one. */
export function highestSeqOf(ranges: SeqRanges): number {
  return (ranges.at(-1) ?? 0) - 1
}

/** Both sets together; `added` are ranges in any order, overlapping as they like. */
export function uniteSeqRanges(ranges: SeqRanges, added: readonly (readonly [number, number])[]): number[] {
  if (added.length === 0) return [...ranges]
  const pairs: (readonly [number, number])[] = [...added]
  for (let i = 0; i < ranges.length; i += 2) pairs.push([ranges[i] ?? 0, ranges[i + 1] ?? 0])
  pairs.sort((a, b) => a[0] - b[0])
  const united: number[] = []
  for (const [from, until] of pairs) {
    const last = united.length - 1
    if (last >= 0 && from <= (united[last] ?? 0)) united[last] = Math.max(united[last] ?? 0, until)
    else united.push(from, until)
  }
  return united
}

/** The runs in a list of numbers, as half-open ranges; in order runs are found without sorting. */
export function runsOf(seqs: readonly number[]): [number, number][] {
  const runs: [number, number][] = []
  let last: [number, number] | undefined
  for (const seq of seqs) {
    if (last !== undefined && seq === last[1]) last[1] = seq + 1
    else {
      last = [seq, seq + 1]
      runs.push(last)
    }
  }
  return runs
}

/** The highest number up to which everything is in the set, counting from 1 (or from 0 when 0 is there); else 0. */
export function ackedSeqOf(ranges: SeqRanges): number {
  const [from, until] = ranges
  return from !== undefined && until !== undefined && from <= 1 ? until - 1 : 0
}
