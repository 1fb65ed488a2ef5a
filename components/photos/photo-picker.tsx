'use client'

import { useId } from 'react'
import type { ReactNode } from 'react'
import { buttonClass } from '@/components/ui/button-style'
import type { ButtonKind } from '@/components/ui/button-style'

/** A button that takes a photo: with `isCamera` a tablet opens its camera at once, elsewhere a file is chosen. */
export function PhotoPicker({
  children,
  onFiles,
  isCamera = false,
  kind = 'plain',
  isDisabled = false,
}: {
  children: ReactNode
  onFiles: (files: File[]) => void
  isCamera?: boolean
  kind?: ButtonKind
  isDisabled?: boolean
}) {
  const id = useId()
  return (
    <span className="relative inline-flex">
      <input
        id={id}
        type="file"
        accept="image/jpeg,image/png,image/webp"
        {...(isCamera ? { capture: 'environment' as const } : { multiple: true })}
        disabled={isDisabled}
        className="peer absolute inset-0 size-full cursor-pointer opacity-0"
        onChange={(event) => {
          onFiles([...(event.target.files ?? [])])
          // The same picture may be chosen again after it was refused.
          event.target.value = ''
        }}
      />
      <label
        htmlFor={id}
        className={buttonClass(
          kind,
          'w-full cursor-pointer peer-focus-visible:outline-2 peer-focus-visible:outline-offset-2 peer-focus-visible:outline-water peer-disabled:text-mute',
        )}
      >
        {children}
      </label>
    </span>
  )
}
