'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { Dialog } from '@/components/ui/dialog'
import { Table } from '@/components/ui/table'
import { TextField } from '@/components/ui/text-field'
import { Time } from '@/components/ui/time'
import { useToast } from '@/components/ui/toast'
import { tryApi } from '@/lib/http/api-client'
import type { IssuedToken, TokenList } from '@/lib/ingest/schema'

type Token = TokenList['items'][number]

/** A gateway's device tokens: make one (shown this once), revoke one. For administrators. */
export function GatewayTokens({
  gateway,
  tokens,
  zone,
}: {
  gateway: { id: string; name: string }
  tokens: readonly Token[]
  zone: string
}) {
  const router = useRouter()
  const [isOpen, setIsOpen] = useState(false)
  const [isMaking, setIsMaking] = useState(false)
  const [issued, setIssued] = useState<IssuedToken | null>(null)
  const [revoking, setRevoking] = useState<Token | null>(null)
  const params = { id: gateway.id }

  async function issue() {
    const { data, problem } = await tryApi<IssuedToken>('POST', '/api/gateways/{id}/tokens', { params })
    if (problem !== null) return problem
    setIsMaking(false)
    setIssued(data)
    router.refresh()
    return null
  }

  async function revoke(tokenId: string) {
    const { problem } = await tryApi('DELETE', '/api/gateways/{id}/tokens/{tokenId}', {
      params: { ...params, tokenId },
    })
    if (problem !== null) return problem
    setRevoking(null)
    router.refresh()
    return null
  }

  return (
    <>
      <Button kind="quiet" onClick={() => setIsOpen(true)}>
        Tokens<span className="sr-only"> of {gateway.name}</span>
      </Button>
      <Dialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title={`Device tokens of ${gateway.name}`}
        actions={
          <>
            <Button onClick={() => setIsOpen(false)}>Close</Button>
            <Button kind="main" onClick={() => setIsMaking(true)}>
              New token
            </Button>
          </>
        }
      >
        <TokenTable tokens={tokens} zone={zone} onRevoke={setRevoking} />
      </Dialog>
      <ConfirmDialog
        isOpen={isMaking}
        onClose={() => setIsMaking(false)}
        title={`New token for ${gateway.name}?`}
        confirmLabel="Make the token"
        onConfirm={issue}
      >
        It is shown once. Tokens made before stay good until they are revoked, so that the gateway can be
        given its new one without a break.
      </ConfirmDialog>
      <ConfirmDialog
        isOpen={revoking !== null}
        onClose={() => setRevoking(null)}
        title="Revoke this token?"
        confirmLabel="Revoke"
        isDanger
        onConfirm={() => revoke(revoking?.id ?? '')}
      >
        A gateway that still sends with it is refused at its next message and keeps its readings until it has
        another. This cannot be undone.
      </ConfirmDialog>
      <NewToken name={gateway.name} issued={issued} onClose={() => setIssued(null)} />
    </>
  )
}

function TokenTable({
  tokens,
  zone,
  onRevoke,
}: {
  tokens: readonly Token[]
  zone: string
  onRevoke: (token: Token) => void
}) {
  return (
    <Table
      caption="Device tokens"
      rows={tokens}
      rowKey={(token) => token.id}
      empty={
        <p className="border-y border-line py-3 text-soft">
          No token yet: this gateway cannot send. Make one.
        </p>
      }
      columns={[
        {
          key: 'made',
          head: 'Made',
          cell: (token) => (
            <>
              <Time at={token.createdAt} zone={zone} />
              <span className="block text-soft">{token.createdBy ?? 'by the set-up'}</span>
            </>
          ),
        },
        {
          key: 'used',
          head: 'Last used',
          cell: (token) =>
            token.lastUsedAt === null ? (
              <span className="text-mute">never</span>
            ) : (
              <Time at={token.lastUsedAt} zone={zone} />
            ),
        },
        {
          key: 'state',
          head: <span className="sr-only">State</span>,
          cell: (token) =>
            token.revokedAt === null ? (
              <Button kind="quiet" onClick={() => onRevoke(token)}>
                Revoke
              </Button>
            ) : (
              <span className="text-mute">revoked</span>
            ),
        },
      ]}
    />
  )
}

/** The token, this once: only its hash is kept. */
function NewToken({
  name,
  issued,
  onClose,
}: {
  name: string
  issued: IssuedToken | null
  onClose: () => void
}) {
  const toast = useToast()
  if (issued === null) return null
  const { token } = issued

  async function copy() {
    try {
      await navigator.clipboard.writeText(token)
      toast({ words: 'Token copied.' })
    } catch {
      toast({ words: 'The browser would not copy. Select the token and copy it by hand.', isWrong: true })
    }
  }

  return (
    <Dialog
      isOpen
      onClose={onClose}
      title={`The new token of ${name}`}
      actions={
        <>
          <Button onClick={copy}>Copy the token</Button>
          <Button kind="due" onClick={onClose}>
            Done
          </Button>
        </>
      }
    >
      <p>Put it into the gateway now. It is not shown again: only its hash is kept here.</p>
      <TextField
        name="token"
        label="Device token"
        className="mt-3"
        inputClassName="font-mono"
        readOnly
        value={token}
        onFocus={(event) => event.target.select()}
      />
    </Dialog>
  )
}
