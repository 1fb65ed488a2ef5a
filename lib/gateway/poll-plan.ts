/** Modbus keeps two tables of 16-bit registers: input registers (function 4) and holding registers (function 3). */
export type RegisterTable = 'input' | 'holding'

/** Neighbouring registers of one table, by protocol address (0–65535). */
export type RegisterSpan = { table: RegisterTable; address: number; count: number }

/** Most registers that one Modbus request may ask for. */
export const MOST_REGISTERS_PER_READ = 125

type PlanOptions = {
  /** Most registers that the module gives at once. */
  mostRegisters?: number
  /** Up to so many registers that nobody asked for are read along, to save a request. */
  mostGapRegisters?: number
}

/**
 * The requests that read all spans: blocks in order of table and address, which do not overlap, so that each register
 * is read exactly once. A span is never split over two blocks, so that a number is never put together from two
 * moments.
 * @throws RangeError when a span, or spans that overlap, are longer than one request may be
 */
export function planReads(spans: readonly RegisterSpan[], options: PlanOptions = {}): RegisterSpan[] {
  const { mostRegisters = MOST_REGISTERS_PER_READ, mostGapRegisters = 0 } = options
  const blocks: RegisterSpan[] = []
  for (const span of uniteOverlapping(spans)) {
    if (span.count > mostRegisters) {
      throw new RangeError(`spans: ${span.count} registers from ${span.address} on do not fit one request`)
    }
    const block = blocks.at(-1)
    const end = span.address + span.count
    const isNear =
      block?.table === span.table && span.address - (block.address + block.count) <= mostGapRegisters
    if (block !== undefined && isNear && end - block.address <= mostRegisters)
      block.count = end - block.address
    else blocks.push({ ...span })
  }
  return blocks
}

function uniteOverlapping(spans: readonly RegisterSpan[]): RegisterSpan[] {
  const sorted = [...spans].sort((a, b) => a.table.localeCompare(b.table) || a.address - b.address)
  const united: RegisterSpan[] = []
  for (const span of sorted) {
    const last = united.at(-1)
    if (last !== undefined && last.table === span.table && span.address < last.address + last.count) {
      last.count = Math.max(last.count, span.address + span.count - last.address)
    } else {
      united.push({ ...span })
    }
  }
  return united
}
