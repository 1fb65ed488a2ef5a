import { closeSync, openSync, readSync, writeSync } from 'node:fs'
import type { IngestAnswer, IngestMessage, Loss, Reading } from '@/lib/gateway/protocol'

/*
 * The gateway's own log, beside its spool and on a disk that is never full: what it was about to keep, what it kept,
 * what it sent and what the server acknowledged. Each line is written before the program acts on it, in one call, so
 * that kill -9 leaves at most half a line at the end.
 */

/** A reading as it was made. `trueMs` is the machine's clock, whatever the gateway's says. */
export type MadeReading = {
  seq: number
  probeId: string
  atMs: number
  trueMs: number
  emfTenthUv: number
  coldCentiC: number
}

export type LogLine =
  | { kind: 'made'; bootId: string; reading: MadeReading }
  | { kind: 'kept'; bootId: string; from: number; to: number }
  | { kind: 'sent'; bootId: string; from: number; to: number; shiftMs: number }
  | { kind: 'lost'; bootId: string; loss: Loss }
  | { kind: 'acknowledged'; bootId: string; seq: number }
  | { kind: 'refused'; bootId: string; seq: number; reason: string }

export type GatewayLogWriter = {
  made: (bootId: string, readings: readonly Reading[], trueMsOf: (seq: number) => number) => void
  kept: (bootId: string, readings: readonly Reading[]) => void
  sent: (message: IngestMessage, atMsOf: (bootId: string, seq: number) => number | undefined) => void
  answered: (bootId: string, answer: IngestAnswer) => void
}

export function openGatewayLog(path: string): GatewayLogWriter {
  const file = openSync(path, 'a')
  // A line that a kill cut in half must not swallow the next.
  writeSync(file, '\n')
  const write = (lines: readonly string[]) => {
    if (lines.length > 0) writeSync(file, `${lines.join('\n')}\n`)
  }
  return {
    made: (bootId, readings, trueMsOf) => write(readings.map((one) => madeLine(bootId, one, trueMsOf))),
    kept: (bootId, readings) => {
      const [first] = readings
      if (first !== undefined) write([`D ${bootId} ${first.seq} ${readings.at(-1)?.seq ?? first.seq} .`])
    },
    sent: ({ bootId, readings, lost = [] }, atMsOf) => {
      const [first] = readings
      const madeAtMs = first === undefined ? undefined : atMsOf(bootId, first.seq)
      const shiftMs = first === undefined || madeAtMs === undefined ? 0 : Date.parse(first.at) - madeAtMs
      write([
        ...lost.map(({ from, to, reason }) => `L ${bootId} ${from} ${to} ${reason} .`),
        ...(first === undefined
          ? []
          : [`S ${bootId} ${first.seq} ${readings.at(-1)?.seq ?? 0} ${shiftMs} .`]),
      ])
    },
    answered: (bootId, { ackedSeq, refused }) =>
      write([
        ...refused.map(({ seq, reason }) => `R ${bootId} ${seq} ${reason} .`),
        `A ${bootId} ${ackedSeq} .`,
      ]),
  }
}

function madeLine(bootId: string, reading: Reading, trueMsOf: (seq: number) => number): string {
  const { seq, probeId, at, emf } = reading
  if (emf === undefined) throw new Error('a gateway of the faults suite reads voltages')
  const [uv, cold] = [Math.round(emf.microvolts * 10), Math.round(emf.coldJunctionC * 100)]
  return `K ${bootId} ${seq} ${probeId} ${Date.parse(at)} ${trueMsOf(seq)} ${uv} ${cold} .`
}

export type GatewayLogReader = {
  /** The whole lines that were added since the last call. */
  read: () => LogLine[]
  close: () => void
}

export function followGatewayLog(path: string): GatewayLogReader {
  const file = openSync(path, 'a+')
  const buffer = Buffer.alloc(1 << 18)
  let offset = 0
  let rest = ''
  return {
    read: () => {
      const lines: LogLine[] = []
      for (let count = readSync(file, buffer, 0, buffer.length, offset); count > 0;) {
        offset += count
        const parts = (rest + buffer.toString('latin1', 0, count)).split('\n')
        rest = parts.pop() ?? ''
        for (const part of parts) {
          const line = parseLine(part)
          if (line !== null) lines.push(line)
        }
        count = readSync(file, buffer, 0, buffer.length, offset)
      }
      return lines
    },
    close: () => closeSync(file),
  }
}

/** Null for a line that was cut in half: whole ones end with a point. */
function parseLine(text: string): LogLine | null {
  if (!text.endsWith(' .')) return null
  const [kind = '', bootId = '', a = '', b = '', c = '', d = '', e = '', f = ''] = text.split(' ')
  const words = text.slice(0, -2)
  switch (kind) {
    case 'K': {
      const reading = {
        seq: Number(a),
        probeId: b,
        atMs: Number(c),
        trueMs: Number(d),
        emfTenthUv: Number(e),
        coldCentiC: Number(f),
      }
      return { kind: 'made', bootId, reading }
    }
    case 'D':
      return { kind: 'kept', bootId, from: Number(a), to: Number(b) }
    case 'S':
      return { kind: 'sent', bootId, from: Number(a), to: Number(b), shiftMs: Number(c) }
    case 'L': {
      const reason = words.split(' ').slice(4).join(' ')
      return { kind: 'lost', bootId, loss: { from: Number(a), to: Number(b), reason } }
    }
    case 'R':
      return { kind: 'refused', bootId, seq: Number(a), reason: words.split(' ').slice(3).join(' ') }
    case 'A':
      return { kind: 'acknowledged', bootId, seq: Number(a) }
    default:
      return null
  }
}
