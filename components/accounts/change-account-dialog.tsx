'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { FormEvent } from 'react'
import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import { useToast } from '@/components/ui/toast'
import { useRequest } from '@/components/ui/use-request'
import type { AccountDto } from '@/lib/accounts/schema'
import { accountSchema } from '@/lib/accounts/schema'
import { callApi, isApiProblem } from '@/lib/http/api-client'
import type { AccountDraft, CustomerChoice } from './account-fields'
import { AccountFields, accountLabels, roleBody } from './account-fields'

/** Changes a person's name and role. */
export function ChangeAccountDialog({
  isOpen,
  onClose,
  account,
  isOwn,
  customers,
}: {
  isOpen: boolean
  onClose: () => void
  account: AccountDto
  isOwn: boolean
  customers: readonly CustomerChoice[]
}) {
  const router = useRouter()
  const toast = useToast()
  const { isBusy, problem, send } = useRequest()
  const [theirs, setTheirs] = useState<AccountDto | null>(null)
  const [draft, setDraft] = useState<AccountDraft>({
    email: account.email,
    name: account.name,
    role: account.role,
    customerId: account.customer?.id ?? '',
    newCustomerName: '',
  })

  async function save(event: FormEvent) {
    event.preventDefault()
    const isSaved = await send(async () => {
      const { revision } = theirs ?? account
      const body = { revision, name: draft.name, ...(await roleBody(draft, setDraft)) }
      try {
        await callApi('PUT', '/api/accounts/{id}', { params: { id: account.id }, body })
      } catch (error) {
        setTheirs(readTheirs(error) ?? theirs)
        throw error
      }
    })
    if (!isSaved) return
    onClose()
    toast({ words: `${draft.name}: saved. It counts from now on.` })
    router.refresh()
  }

  return (
    <Dialog isOpen={isOpen} onClose={onClose} title={`Change ${account.name}`} isBusy={isBusy}>
      <form method="post" onSubmit={save} noValidate className="grid gap-4">
        <FormError problem={problem} labels={accountLabels} />
        {theirs === null ? null : (
          <Notice tone="attention">
            It now says {theirs.name}, {theirs.role}
            {theirs.customer === null ? '' : ` of ${theirs.customer.name}`}. Saving again puts yours over it.
          </Notice>
        )}
        {isOwn && draft.role !== 'administrator' ? (
          <Notice tone="attention">
            This is your own account: you will not be able to change accounts any more.
          </Notice>
        ) : null}
        <p className="text-soft">{account.email}</p>
        <AccountFields draft={draft} onDraft={setDraft} customers={customers} fields={problem?.fields} />
        <div className="mt-1 flex flex-wrap justify-end gap-2">
          <Button onClick={onClose} disabled={isBusy}>
            Cancel
          </Button>
          <Button type="submit" kind="due" isBusy={isBusy}>
            {isBusy ? 'Saving' : 'Save'}
          </Button>
        </div>
      </form>
    </Dialog>
  )
}

/** With a stale edit the server answers the account as it is now. */
function readTheirs(error: unknown): AccountDto | null {
  if (!isApiProblem(error)) return null
  const parsed = accountSchema.safeParse(error.problem.current)
  return parsed.success ? parsed.data : null
}
