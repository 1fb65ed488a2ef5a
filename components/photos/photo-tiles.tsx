'use client'

import { useState } from 'react'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { PhotoDialog } from './photo-dialog'
import { PhotoUnderWayTile } from './photo-under-way'
import { photoWords } from './photo-words'
import { photoHref } from './use-photos'
import type { Photos } from './use-photos'

/** The photos side by side, each opened by a press; after them those that are on their way. */
export function PhotoTiles({
  photos,
  zone,
  mayChange,
  heightPx,
  hasCaptions,
}: {
  photos: Photos
  zone: string
  mayChange: boolean
  heightPx: number
  hasCaptions: boolean
}) {
  const [openId, setOpenId] = useState<string | null>(null)
  const there = (photos.photos ?? []).filter((photo) => photo.removed === null)
  const opened = there.find((photo) => photo.id === openId)
  return (
    <>
      <ul className="flex flex-wrap gap-3">
        {there.map((photo) => (
          <li key={photo.id} className="min-w-0">
            <Tile
              photo={photo}
              heightPx={heightPx}
              hasCaption={hasCaptions}
              onOpen={() => setOpenId(photo.id)}
            />
          </li>
        ))}
        {photos.underWay.map((photo) => (
          <li key={photo.id} className="min-w-0">
            <PhotoUnderWayTile
              photo={photo}
              heightPx={heightPx}
              onAgain={() => void photos.send(photo)}
              onDrop={() => photos.drop(photo)}
            />
          </li>
        ))}
      </ul>
      {opened === undefined ? null : (
        <PhotoDialog
          key={opened.id}
          photo={opened}
          zone={zone}
          mayChange={mayChange}
          photos={photos}
          onClose={() => setOpenId(null)}
        />
      )}
    </>
  )
}

function Tile({
  photo,
  heightPx,
  hasCaption,
  onOpen,
}: {
  photo: PhotoDto
  heightPx: number
  hasCaption: boolean
  onOpen: () => void
}) {
  // The picture's own shape, within bounds; known beforehand, so that nothing jumps when it comes.
  const shape = Math.min(Math.max(photo.widthPx / photo.heightPx, 0.6), 1.8)
  const widthPx = Math.round(heightPx * shape)
  return (
    <figure style={{ width: widthPx }}>
      <button type="button" onClick={onOpen} className="block cursor-zoom-in rounded-control">
        <img
          src={photoHref(photo.id, 'thumbnail')}
          alt={`Open: ${photoWords(photo)}`}
          width={widthPx}
          height={heightPx}
          loading="lazy"
          className="rounded-control border border-line object-cover"
          style={{ height: heightPx, width: widthPx }}
        />
      </button>
      {hasCaption ? (
        <figcaption className="mt-1 text-small text-soft [overflow-wrap:anywhere]">
          {photo.caption === '' ? photoWords(photo) : photo.caption}
        </figcaption>
      ) : null}
    </figure>
  )
}
