'use client'

import { PhotoPicker } from '@/components/photos/photo-picker'
import { PhotoTiles } from '@/components/photos/photo-tiles'
import { photoWords } from '@/components/photos/photo-words'
import { usePhotos } from '@/components/photos/use-photos'
import { formatInstant } from '@/lib/format'
import { photosAtMost } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'

/** The photos of a firing; of one that was removed, who did it and why. Nothing of it enters the score. */
export function FiringPhotos({
  firingId,
  known,
  mayAdd,
  zone,
}: {
  firingId: string
  known: readonly PhotoDto[]
  mayAdd: boolean
  zone: string
}) {
  const photos = usePhotos(firingId, known)
  const all = photos.photos ?? []
  const there = all.filter((photo) => photo.removed === null)
  const left = photosAtMost - there.length - photos.underWay.length
  return (
    <section>
      <h2 className="mb-1">
        Photos {there.length === 0 ? null : <span className="font-normal text-mute">{there.length}</span>}
      </h2>
      <div className="border-y border-line py-3">
        {there.length === 0 && photos.underWay.length === 0 ? (
          <p className="text-soft">
            {mayAdd ? 'None yet: the face after the rest, a blister, a stave that was replaced.' : 'None.'}
          </p>
        ) : (
          <PhotoTiles photos={photos} zone={zone} mayChange={mayAdd} heightPx={132} hasCaptions />
        )}
        {mayAdd && left > 0 ? (
          <div className="mt-3 flex flex-wrap items-center gap-3 no-print">
            <PhotoPicker onFiles={(files) => photos.take(files.slice(0, left), 'face')}>
              Add photos
            </PhotoPicker>
            <p className="text-small text-soft">
              JPEG, PNG or WebP, up to 15 MB; place and camera are not kept. {left} more.
            </p>
          </div>
        ) : null}
        <RemovedPhotos photos={all} zone={zone} />
      </div>
    </section>
  )
}

function RemovedPhotos({ photos, zone }: { photos: readonly PhotoDto[]; zone: string }) {
  const removed = photos.flatMap((photo) => (photo.removed === null ? [] : [{ photo, ...photo.removed }]))
  if (removed.length === 0) return null
  return (
    <ul className="mt-3 text-small text-soft">
      {removed.map(({ photo, at, by, reason }) => (
        <li key={photo.id}>
          <del>{photoWords(photo)}</del>, removed by {by} on {formatInstant(at, zone)}: {reason}
        </li>
      ))}
    </ul>
  )
}
