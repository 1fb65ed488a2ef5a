'use client'

import { PhotoPicker } from '@/components/photos/photo-picker'
import { PhotoTiles } from '@/components/photos/photo-tiles'
import type { Photos } from '@/components/photos/use-photos'
import { photosAtMost } from '@/lib/firings/photo-kinds'
import type { PhotoKind } from '@/lib/firings/photo-kinds'

/** Photos at the fireside: one press opens the tablet's camera, and what was taken goes by itself. */
export function FiresidePhotos({
  photos,
  zone,
  kind = 'face',
}: {
  photos: Photos
  zone: string
  kind?: PhotoKind
}) {
  const there = (photos.photos ?? []).filter((photo) => photo.removed === null)
  const isFull = there.length + photos.underWay.length >= photosAtMost
  return (
    <div className="flex flex-wrap items-start gap-3">
      <PhotoPicker isCamera isDisabled={isFull} onFiles={(files) => photos.take(files, kind)}>
        {isFull ? `${photosAtMost} photos, no more` : kind === 'face' ? 'Photo of the face' : 'Photo'}
      </PhotoPicker>
      <PhotoTiles photos={photos} zone={zone} mayChange={false} heightPx={85} hasCaptions={false} />
    </div>
  )
}
