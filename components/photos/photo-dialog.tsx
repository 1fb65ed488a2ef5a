'use client'

import { useId, useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormError } from '@/components/ui/form-error'
import { SelectField } from '@/components/ui/select-field'
import { TextField } from '@/components/ui/text-field'
import { useRequest } from '@/components/ui/use-request'
import { formatInstant } from '@/lib/format'
import { photoKinds } from '@/lib/firings/photo-kinds'
import type { PhotoDto } from '@/lib/firings/photo-schema'
import { problemOf } from '@/lib/http/api-client'
import { photoKindNames, photoWords } from './photo-words'
import { photoHref } from './use-photos'
import { useModal } from '@/components/ui/use-modal'
import type { Photos } from './use-photos'

/** One photo, large, with who took it; what it is said to show is put right here, and here it is removed. */
export function PhotoDialog({
  photo,
  zone,
  mayChange,
  photos,
  onClose,
}: {
  photo: PhotoDto
  zone: string
  mayChange: boolean
  photos: Pick<Photos, 'describe' | 'remove'>
  onClose: () => void
}) {
  const dialog = useModal(true)
  const titleId = useId()
  const [isRemoving, setIsRemoving] = useState(false)
  return (
    <dialog
      ref={dialog}
      aria-labelledby={titleId}
      className="m-auto max-h-[96dvh] w-[min(72rem,calc(100vw-32px))] overflow-y-auto rounded-control border border-line bg-raised p-5 text-text shadow-float"
      onCancel={(event) => {
        event.preventDefault()
        onClose()
      }}
    >
      <div className="mb-3 flex items-start justify-between gap-4">
        <div>
          <h2 id={titleId} className="text-large font-[640]">
            {photoWords(photo)}
          </h2>
          <p className="text-soft">
            {photo.by}, {formatInstant(photo.addedAt, zone)}
          </p>
        </div>
        <Button onClick={onClose} autoFocus>
          Close
        </Button>
      </div>
      {/* Through our own address, already in its final size: nothing is left to optimise. */}
      <img
        src={photoHref(photo.id, 'large')}
        alt={photoWords(photo)}
        width={photo.widthPx}
        height={photo.heightPx}
        className="mx-auto h-auto max-h-[68dvh] w-auto max-w-full"
      />
      {mayChange ? (
        <PhotoForm
          photo={photo}
          onDescribe={(body) => photos.describe(photo.id, body)}
          onRemove={() => setIsRemoving(true)}
        />
      ) : null}
      <ConfirmDialog
        isOpen={isRemoving}
        onClose={() => setIsRemoving(false)}
        title="Remove this photo?"
        confirmLabel="Remove"
        isDanger
        reasonLabel="Why"
        onConfirm={async (reason) => {
          try {
            await photos.remove(photo.id, reason)
            onClose()
            return null
          } catch (error) {
            return problemOf(error)
          }
        }}
      >
        The picture is erased for good. That there was one, who removed it and why stays on the firing’s page.
      </ConfirmDialog>
    </dialog>
  )
}

const options = photoKinds.map((kind) => ({ value: kind, label: photoKindNames[kind] }))

function PhotoForm({
  photo,
  onDescribe,
  onRemove,
}: {
  photo: PhotoDto
  onDescribe: (body: Pick<PhotoDto, 'kind' | 'caption'>) => Promise<void>
  onRemove: () => void
}) {
  const [kind, setKind] = useState(photo.kind)
  const [caption, setCaption] = useState(photo.caption)
  const { isBusy, problem, send } = useRequest()
  const isChanged = kind !== photo.kind || caption.trim() !== photo.caption
  const save = (event: FormEvent) => {
    event.preventDefault()
    void send(() => onDescribe({ kind, caption: caption.trim() }))
  }
  return (
    <form method="post" onSubmit={save} noValidate className="mt-4">
      <FormError problem={problem} labels={{ kind: 'Shows', caption: 'Caption' }} />
      <div className="flex flex-wrap items-end gap-3">
        <SelectField
          name="kind"
          label="Shows"
          options={options}
          value={kind}
          onChange={(event) => setKind(photoKinds.find((one) => one === event.target.value) ?? kind)}
          className="w-32"
        />
        <TextField
          name="caption"
          label="Caption"
          isOptional
          maxLength={200}
          value={caption}
          onChange={(event) => setCaption(event.target.value)}
          error={problem?.fields?.['caption']}
          className="min-w-60 flex-1"
        />
        <Button type="submit" kind="main" isBusy={isBusy} disabled={!isChanged}>
          {isBusy ? 'Saving' : 'Save'}
        </Button>
        <Button kind="danger" onClick={onRemove}>
          Remove
        </Button>
      </div>
    </form>
  )
}
