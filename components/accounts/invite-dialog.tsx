'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import { FormError } from '@/components/ui/form-error'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { InvitationDto } from '@/lib/accounts/schema'
import { callApi } from '@/lib/http/api-client'
import type { AccountDraft, CustomerChoice } from './account-fields'
import { AccountFields, accountLabels, roleBody } from './account-fields'
import { HandOverLink } from './hand-over-link'

const empty: AccountDraft = { email: '', name: '', role: '', customerId: '', newCustomerName: '' }

/** Invites a person. What was typed stays when the dialog is closed, until it is sent. */
export function InviteDialog({ customers }: { customers: readonly CustomerChoice[] }) {
  const router = useRouter()
  const toast = useToast()
  const [isOpen, setIsOpen] = useState(false)
  const [draft, setDraft] = useState(empty)
  const [unsent, setUnsent] = useState<InvitationDto | null>(null)
  const { isBusy, problem, send } = useRequest()

  async function invite(event: FormEvent) {
    event.preventDefault()
    await send(async () => {
      const body = { email: draft.email, name: draft.name, ...(await roleBody(draft, setDraft)) }
      const invitation = await callApi<InvitationDto>('POST', '/api/accounts', { body })
      setDraft(empty)
      setIsOpen(false)
      if (invitation.isMailSent) toast({ words: `Invitation mailed to ${invitation.account.email}.` })
      else setUnsent(invitation)
    })
    router.refresh()
  }

  return (
    <>
      <Button kind="main" onClick={() => setIsOpen(true)}>
        Invite a person
      </Button>
      <Dialog isOpen={isOpen} onClose={() => setIsOpen(false)} title="Invite a person" isBusy={isBusy}>
        <form method="post" onSubmit={invite} noValidate className="grid gap-4">
          <FormError problem={problem} labels={accountLabels} />
          <TextField
            name="email"
            type="email"
            label="E-mail"
            hint="The link to choose a password is mailed here; it serves once, for 3 days."
            autoComplete="off"
            value={draft.email}
            onChange={(event) => setDraft({ ...draft, email: event.target.value })}
            error={problem?.fields?.email}
          />
          <AccountFields draft={draft} onDraft={setDraft} customers={customers} fields={problem?.fields} />
          <div className="mt-1 flex flex-wrap justify-end gap-2">
            <Button onClick={() => setIsOpen(false)} disabled={isBusy}>
              Cancel
            </Button>
            <Button type="submit" kind="due" isBusy={isBusy}>
              {isBusy ? 'Inviting' : 'Invite'}
            </Button>
          </div>
        </form>
      </Dialog>
      <HandOverLink invitation={unsent} onClose={() => setUnsent(null)} />
    </>
  )
}
