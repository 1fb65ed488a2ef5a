'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import type { DeviceDto } from '@/lib/devices/schema'
import { tryApi } from '@/lib/http/api-client'

/** Takes a lost or retired device out, for good. */
export function RevokeButton({ device }: { device: DeviceDto }) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)

  async function revoke() {
    const { problem } = await tryApi('POST', '/api/devices/{id}/revoke', { params: { id: device.id } })
    if (problem !== null) return problem
    setIsOpen(false)
    router.refresh()
    return null
  }

  return (
    <>
      <Button kind="quiet" onClick={() => setIsOpen(true)}>
        Revoke<span className="sr-only"> {device.name}</span>
      </Button>
      <ConfirmDialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title={`Revoke ${device.name}?`}
        confirmLabel="Revoke"
        isDanger
        onConfirm={revoke}
      >
        {device.person === null
          ? 'Within 5 seconds it shows nothing any more.'
          : `${device.person} is signed in there and is out at once; a firing goes on.`}{' '}
        Marks that wait in it without a network are lost to you. This cannot be undone; the tablet can be
        enrolled again as a new device.
      </ConfirmDialog>
    </>
  )
}
