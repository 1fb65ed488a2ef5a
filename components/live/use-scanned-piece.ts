'use client'

import { useState } from 'react'
import useSWR from 'swr'
import type { PieceDto } from '@/lib/batches/schema'
import { apiPath, getApi } from '@/lib/http/api-client'
import type { Page } from '@/lib/http/cursor'
import { scannedSerial, useScanner } from './use-scanner'

/**
 * The waiting piece whose route card was scanned, here or in the room before.
 *
 * @param firstSerial from the room; null for none
 * @param onScan another one was scanned: what was chosen by hand before is over
 */
export function useScannedPiece(
  queue: readonly PieceDto[],
  firstSerial: string | null,
  onScan: () => void,
): { piece: PieceDto | null; words: string | null } {
  const [text, setText] = useState(firstSerial)
  useScanner((scanned) => {
    setText(scanned)
    onScan()
  })
  const serial = text === null ? null : scannedSerial(text)
  const inQueue = queue.find((piece) => piece.serial === serial)
  const found = useSWR(
    serial === null || inQueue !== undefined
      ? null
      : apiPath('/api/barrels', {}, { show: 'waiting', limit: 5, q: serial }),
    getApi<Page<PieceDto>>,
  )
  const piece = inQueue ?? found.data?.items.find((one) => one.serial === serial) ?? null
  return { piece, words: wordsOf(text, serial, piece, found.isLoading) }
}

function wordsOf(text: string | null, serial: string | null, piece: PieceDto | null, isLooking: boolean) {
  if (text === null) return null
  if (serial === null) return `Scanned ${text.slice(0, 24)}: no serial of ours. Scan it again.`
  if (piece !== null) return `Scanned ${serial}.`
  return isLooking ? `Scanned ${serial}, looking for it.` : `${serial} does not wait in the queue.`
}
