'use client'

import { useState } from 'react'
import { useLosses } from '@/components/losses/use-losses'
import { usePhotos } from '@/components/photos/use-photos'
import { Button } from '@/components/ui/button'
import type { FiringDto } from '@/lib/firings/schema'
import type { LossPlace } from './fireside-losses'
import { FiresideLosses, FiresideLossSheet } from './fireside-losses'
import { FiresidePhotos } from './fireside-photos'
import { FiresideFinish } from './fireside-finish'
import type { FinishWords, SiteWords } from './fireside-finish'
import { FiresideSheet } from './fireside-sheet'
import type { Problem } from '@/components/ui/problem'
import type { TemperatureUnit } from '@/lib/format'

type Firing = Pick<FiringDto, 'id' | 'piece' | 'batch' | 'bendAt' | 'toastAt'>

/** Before the toast a stave breaks at the pull; later it blisters. */
function lossPlaceOf(firing: Firing): LossPlace {
  const canBreak = firing.bendAt !== null
  const early = canBreak ? 'broken at the pull' : 'leak'
  return {
    firingId: firing.id,
    woodLot: firing.batch.woodLot,
    canBreak,
    likely: firing.toastAt === null ? early : 'blister',
  }
}

/** The finish with what is kept beside it: losses and photos go to the server at once, the rest when it is finished. */
export function FinishSheet({
  firing,
  zone,
  ...finish
}: {
  firing: Firing
  zone: string
  unit: TemperatureUnit
  siteWords: SiteWords
  isBusy: boolean
  problem: Problem | null
  waitingCount: number
  onFinish: (words: FinishWords) => void
  onClose: () => void
}) {
  const photos = usePhotos(firing.id)
  const losses = useLosses(firing.piece.id)
  const [isNoting, setIsNoting] = useState(false)
  return (
    <>
      <FiresideFinish
        {...finish}
        photos={<FiresidePhotos photos={photos} zone={zone} />}
        losses={<FiresideLosses losses={losses} firingId={firing.id} onNote={() => setIsNoting(true)} />}
      />
      {isNoting ? (
        <FiresideLossSheet place={lossPlaceOf(firing)} losses={losses} onClose={() => setIsNoting(false)} />
      ) : null}
    </>
  )
}

/** A loss while the firing goes on. */
export function LossSheet({ firing, onClose }: { firing: Firing; onClose: () => void }) {
  const losses = useLosses(firing.piece.id)
  return <FiresideLossSheet place={lossPlaceOf(firing)} losses={losses} onClose={onClose} />
}

/** Photos while the firing goes on. */
export function PhotoSheet({ firing, zone, onClose }: { firing: Firing; zone: string; onClose: () => void }) {
  const photos = usePhotos(firing.id)
  return (
    <FiresideSheet title="Photos" onClose={onClose}>
      <p className="mb-4 text-soft">
        They are kept with this firing, without place or camera. A caption is added at the desk.
      </p>
      <FiresidePhotos photos={photos} zone={zone} kind="other" />
      <div className="mt-5 flex justify-end">
        <Button kind="main" onClick={onClose}>
          Close
        </Button>
      </div>
    </FiresideSheet>
  )
}
