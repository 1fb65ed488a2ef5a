'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { CopyDialog } from '@/components/probes/copy-dialog'
import { TokenTable } from '@/components/probes/token-table'
import type { Token } from '@/components/probes/token-table'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { formatInstant } from '@/lib/format'
import { tryApi } from '@/lib/http/api-client'
import type { EnrolmentCode, IssuedToken } from '@/lib/ingest/schema'

type Asked = { what: 'code' } | { what: 'token' } | { what: 'rotate' | 'revoke'; token: Token }
type Shown = { kind: 'code'; code: EnrolmentCode } | { kind: 'token'; token: string }

/** How a gateway proves itself: enrol by a code, make, rotate and revoke tokens. For administrators. */
export function GatewayTokens({
  gateway,
  tokens,
  zone,
}: {
  gateway: { id: string; name: string; isRetired: boolean }
  tokens: readonly Token[]
  zone: string
}) {
  const router = useRouter()
  const [asked, setAsked] = useState<Asked | null>(null)
  const [shown, setShown] = useState<Shown | null>(null)
  const close = () => setAsked(null)

  async function run(work: () => Promise<Shown | null>) {
    const made = await work()
    setAsked(null)
    setShown(made)
    router.refresh()
  }

  async function confirm() {
    if (asked === null) return null
    const params = { id: gateway.id, tokenId: 'token' in asked ? asked.token.id : '' }
    if (asked.what === 'revoke') {
      const { problem } = await tryApi('DELETE', '/api/gateways/{id}/tokens/{tokenId}', { params })
      if (problem === null) await run(async () => null)
      return problem
    }
    if (asked.what === 'code') {
      const { data, problem } = await tryApi<EnrolmentCode>('POST', '/api/gateways/{id}/enrolment-codes', {
        params,
      })
      if (problem === null) await run(async () => ({ kind: 'code', code: data }))
      return problem
    }
    const path =
      asked.what === 'token' ? '/api/gateways/{id}/tokens' : '/api/gateways/{id}/tokens/{tokenId}/rotate'
    const { data, problem } = await tryApi<IssuedToken>('POST', path, { params })
    if (problem === null) await run(async () => ({ kind: 'token', token: data.token }))
    return problem
  }

  return (
    <section>
      <div className="mb-2 flex flex-wrap items-end justify-between gap-3">
        <h2>Device tokens</h2>
        {gateway.isRetired ? null : (
          <span className="flex flex-wrap gap-2">
            <Button onClick={() => setAsked({ what: 'token' })}>New token</Button>
            <Button kind="main" onClick={() => setAsked({ what: 'code' })}>
              Make a code to enrol
            </Button>
          </span>
        )}
      </div>
      <TokenTable
        tokens={tokens}
        zone={zone}
        onRotate={(token) => setAsked({ what: 'rotate', token })}
        onRevoke={(token) => setAsked({ what: 'revoke', token })}
      />
      <ConfirmDialog
        isOpen={asked !== null}
        onClose={close}
        title={asked === null ? '' : titleOf(asked, gateway.name)}
        confirmLabel={asked === null ? '' : labels[asked.what]}
        isDanger={asked?.what === 'revoke'}
        onConfirm={confirm}
      >
        {asked === null ? null : explanations[asked.what]}
      </ConfirmDialog>
      {shown === null ? null : (
        <Secret shown={shown} name={gateway.name} zone={zone} onClose={() => setShown(null)} />
      )}
    </section>
  )
}

const labels = {
  code: 'Make the code',
  token: 'Make the token',
  rotate: 'Rotate',
  revoke: 'Revoke',
} as const

const explanations = {
  code: 'The code is shown once, serves once, and ends after 30 minutes or with a newer one. The program that enrols with it gets its token by itself. Tokens that this gateway has now serve until the new one speaks, and for 24 hours at most.',
  token:
    'For a program that is given its token by hand. It is shown once. Tokens made before stay good until they are revoked.',
  rotate:
    'You get a new token to put into the gateway. The old one serves until the new one is first used, and for 24 hours at most, so nothing is interrupted.',
  revoke:
    'A gateway that still sends with it is refused within five seconds and keeps its readings until it has another. This cannot be undone.',
} as const

function titleOf(asked: Asked, name: string): string {
  if (asked.what === 'code') return `A code to enrol ${name}?`
  if (asked.what === 'token') return `New token for ${name}?`
  return asked.what === 'rotate' ? `Rotate a token of ${name}?` : 'Revoke this token?'
}

function Secret({
  shown,
  name,
  zone,
  onClose,
}: {
  shown: Shown
  name: string
  zone: string
  onClose: () => void
}) {
  if (shown.kind === 'token') {
    return (
      <CopyDialog
        title={`The new token of ${name}`}
        label="Device token"
        secret={shown.token}
        onClose={onClose}
      >
        <p>Put it into the gateway now. It is not shown again: only its hash is kept here.</p>
      </CopyDialog>
    )
  }
  return (
    <CopyDialog
      title={`Enrol ${name} with this code`}
      label="Code"
      secret={shown.code.code}
      isLarge
      onClose={onClose}
    >
      <p>
        Type it into the gateway’s program before {formatInstant(shown.code.expiresAt, zone, 'time')}. It is
        not shown again. Small letters and missing hyphens do not matter.
      </p>
    </CopyDialog>
  )
}
