'use client'

import { Button } from '@/components/ui/button'
import { Dialog } from '@/components/ui/dialog'
import { TextField } from '@/components/ui/text-field'
import { useToast } from '@/components/ui/toast'
import type { InvitationDto } from '@/lib/accounts/schema'

/** When the mail could not go: the account is there, and the link can be handed over another way. */
export function HandOverLink({
  invitation,
  onClose,
}: {
  invitation: InvitationDto | null
  onClose: () => void
}) {
  const toast = useToast()
  if (invitation === null || invitation.link === null) return null
  const { account, link } = invitation

  async function copy(text: string) {
    await navigator.clipboard.writeText(text)
    toast({ words: 'Link copied.' })
  }

  return (
    <Dialog
      isOpen
      onClose={onClose}
      title="The mail could not be sent"
      actions={
        <>
          <Button onClick={() => copy(link)}>Copy the link</Button>
          <Button kind="due" onClick={onClose}>
            Done
          </Button>
        </>
      }
    >
      <p>
        The account of {account.name} is there. Hand this link over yourself; it serves once, for 3 days, and
        is not shown again. Or send the invitation again from the list when mail works.
      </p>
      <TextField
        name="link"
        label="One-time link"
        className="mt-3"
        readOnly
        value={link}
        onFocus={(event) => event.target.select()}
      />
    </Dialog>
  )
}
