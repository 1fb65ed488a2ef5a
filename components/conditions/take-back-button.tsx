'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { callApi, problemOf } from '@/lib/http/api-client'

/** Takes a reading or a file back, with a reason; it stays in the audit trail. */
export function TakeBackButton({ path, what }: { path: string; what: string }) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <Button kind="quiet" onClick={() => setIsOpen(true)}>
        Take back<span className="sr-only"> {what}</span>
      </Button>
      <ConfirmDialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title={`Take back ${what}?`}
        confirmLabel="Take back"
        isDanger
        reasonLabel="Why"
        onConfirm={async (reason) => {
          try {
            await callApi('POST', path, { body: { reason } })
            setIsOpen(false)
            router.refresh()
            return null
          } catch (error) {
            return problemOf(error)
          }
        }}
      >
        It counts no more. That it was there, and your reason, stay on record.
      </ConfirmDialog>
    </>
  )
}
