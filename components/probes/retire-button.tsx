'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { ReactNode } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { tryApi } from '@/lib/http/api-client'

/** Retires a probe or a gateway, after asking why; it cannot be undone. */
export function RetireButton({ name, path, children }: { name: string; path: string; children: ReactNode }) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)

  async function retire(reason: string) {
    const { problem } = await tryApi('POST', path, { body: { reason } })
    if (problem !== null) return problem
    setIsOpen(false)
    router.refresh()
    return null
  }

  return (
    <>
      <Button kind="danger" onClick={() => setIsOpen(true)}>
        Retire
      </Button>
      <ConfirmDialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title={`Retire ${name}?`}
        confirmLabel="Retire"
        isDanger
        reasonLabel="Why"
        onConfirm={retire}
      >
        {children}
      </ConfirmDialog>
    </>
  )
}
