'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { useToast } from '@/components/ui/toast'
import type { AccountDto, InvitationDto } from '@/lib/accounts/schema'
import { callApi, problemOf, tryApi } from '@/lib/http/api-client'
import type { CustomerChoice } from './account-fields'
import { ChangeAccountDialog } from './change-account-dialog'
import { HandOverLink } from './hand-over-link'

/** What an administrator can do with one account of the list. */
export function AccountActions({
  account,
  isOwn,
  customers,
}: {
  account: AccountDto
  isOwn: boolean
  customers: readonly CustomerChoice[]
}) {
  const router = useRouter()
  const toast = useToast()
  const [open, setOpen] = useState<'change' | 'close' | null>(null)
  const [unsent, setUnsent] = useState<InvitationDto | null>(null)
  const params = { id: account.id }

  async function reopen() {
    const body = { revision: account.revision }
    const { problem } = await tryApi('POST', '/api/accounts/{id}/reopen', { params, body })
    toast(problem === null ? { words: `${account.name} may sign in again.` } : wrong(problem.detail))
    router.refresh()
  }

  async function inviteAgain() {
    try {
      const sent = await callApi<InvitationDto>('POST', '/api/accounts/{id}/invitation', { params })
      if (sent.isMailSent) toast({ words: `Invitation mailed to ${account.email} again.` })
      else setUnsent(sent)
    } catch (error) {
      toast(wrong(problemOf(error).detail))
    }
    router.refresh()
  }

  async function close() {
    const body = { revision: account.revision }
    const { problem } = await tryApi('POST', '/api/accounts/{id}/close', { params, body })
    if (problem !== null) return problem
    setOpen(null)
    toast({ words: `The account of ${account.name} is closed.` })
    router.refresh()
    return null
  }

  return (
    <div className="flex flex-wrap justify-end gap-x-4">
      {account.state === 'invited' ? (
        <Button kind="quiet" onClick={inviteAgain}>
          Send again
        </Button>
      ) : null}
      {account.state === 'closed' ? (
        <Button kind="quiet" onClick={reopen}>
          Open again
        </Button>
      ) : (
        <Button kind="quiet" onClick={() => setOpen('change')}>
          Change<span className="sr-only"> {account.name}</span>
        </Button>
      )}
      {account.state === 'closed' || isOwn ? null : (
        <Button kind="quiet" onClick={() => setOpen('close')}>
          Close<span className="sr-only"> {account.name}</span>
        </Button>
      )}
      <ChangeAccountDialog
        key={account.revision}
        isOpen={open === 'change'}
        onClose={() => setOpen(null)}
        account={account}
        isOwn={isOwn}
        customers={customers}
      />
      <ConfirmDialog
        isOpen={open === 'close'}
        onClose={() => setOpen(null)}
        title={`Close the account of ${account.name}?`}
        confirmLabel="Close the account"
        isDanger
        onConfirm={close}
      >
        {account.name} is signed out everywhere at once and cannot sign in. What was signed and done keeps the
        name. You can open the account again.
      </ConfirmDialog>
      <HandOverLink invitation={unsent} onClose={() => setUnsent(null)} />
    </div>
  )
}

function wrong(words: string) {
  return { words, isWrong: true }
}
