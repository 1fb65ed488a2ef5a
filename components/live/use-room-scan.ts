'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { PieceDto } from '@/lib/batches/schema'
import type { HearthDto } from '@/lib/probes/schema'
import { readRoomScan } from './room-scan'
import { useScanner } from './use-scanner'

/** A scan in the room opens the barrel's firing, or its start on a free hearth; or it says why not. */
export function useRoomScan(
  hearths: readonly HearthDto[],
  waiting: readonly PieceDto[],
  who: { canFire: boolean; ownHearth: number | null },
): { words: string | null; piece: PieceDto | null; forget: () => void } {
  const router = useRouter()
  const [found, setFound] = useState<{ words: string; piece: PieceDto | null } | null>(null)
  useScanner((text) => {
    const scan = readRoomScan(text, hearths, waiting, who)
    if (scan.kind === 'open') router.push(scan.href)
    else setFound({ words: scan.words, piece: scan.kind === 'choose hearth' ? scan.piece : null })
  })
  return { words: found?.words ?? null, piece: found?.piece ?? null, forget: () => setFound(null) }
}
