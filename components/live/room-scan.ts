import type { PieceDto } from '@/lib/batches/schema'
import type { HearthDto } from '@/lib/probes/schema'
import { scannedSerial } from './use-scanner'

/** What a scan in the room leads to: a firing, a start, a hearth to choose first, or a sentence. */
export type RoomScan =
  | { kind: 'open'; href: string }
  | { kind: 'choose hearth'; piece: PieceDto; words: string }
  | { kind: 'nothing'; words: string }

/**
 * @param waiting the queue as this screen holds it
 * @param ownHearth number of the hearth at which the tablet stands; null for none
 */
export function readRoomScan(
  text: string,
  hearths: readonly HearthDto[],
  waiting: readonly PieceDto[],
  { canFire, ownHearth }: { canFire: boolean; ownHearth: number | null },
): RoomScan {
  const serial = scannedSerial(text)
  if (serial === null) {
    return { kind: 'nothing', words: `Scanned ${text.slice(0, 24)}: no serial of ours. Scan it again.` }
  }
  const live = hearths.find((hearth) => hearth.live?.serial === serial)?.live
  if (live !== undefined && live !== null) return { kind: 'open', href: `/fireside/${live.firingId}` }
  const piece = waiting.find((one) => one.serial === serial)
  if (piece === undefined) {
    return { kind: 'nothing', words: `${serial} is neither over a fire nor in the queue.` }
  }
  if (!canFire) {
    return { kind: 'nothing', words: `${serial} waits in the queue. Choose your name to start its preheat.` }
  }
  const free = hearths.filter((hearth) => hearth.isActive && hearth.live === null)
  const only = free.find((hearth) => hearth.number === ownHearth) ?? (free.length === 1 ? free[0] : undefined)
  if (only !== undefined) return { kind: 'open', href: startHref(only.number, serial) }
  return free.length === 0
    ? { kind: 'nothing', words: `${serial} waits in the queue, and no hearth is free.` }
    : { kind: 'choose hearth', piece, words: `${serial} was scanned. Touch the hearth it goes to.` }
}

/** The start of a firing on a hearth, with the barrel chosen already. */
export function startHref(hearthNumber: number, serial: string | null): string {
  const piece = serial === null ? '' : `&serial=${encodeURIComponent(serial)}`
  return `/room/start?hearth=${hearthNumber}${piece}`
}
