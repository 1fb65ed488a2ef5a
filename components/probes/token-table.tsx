import { Button } from '@/components/ui/button'
import { Table } from '@/components/ui/table'
import { Time } from '@/components/ui/time'
import type { TokenList } from '@/lib/ingest/schema'

export type Token = TokenList['items'][number]

/** A gateway's tokens, never the tokens themselves. */
export function TokenTable({
  tokens,
  zone,
  onRotate,
  onRevoke,
}: {
  tokens: readonly Token[]
  zone: string
  onRotate: (token: Token) => void
  onRevoke: (token: Token) => void
}) {
  return (
    <Table
      caption="Device tokens"
      rows={tokens}
      rowKey={(token) => token.id}
      empty={
        <p className="border-y border-line py-3 text-soft">
          No token yet: this gateway cannot send. Make a code and enrol its program with it.
        </p>
      }
      columns={[
        { key: 'made', head: 'Made', cell: (token) => <Time at={token.createdAt} zone={zone} /> },
        { key: 'by', head: 'By', cell: (token) => token.createdBy ?? 'the set-up' },
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
        { key: 'state', head: 'State', cell: (token) => <State token={token} zone={zone} /> },
        {
          key: 'do',
          head: <span className="sr-only">Do</span>,
          cell: (token) =>
            token.revokedAt !== null ? null : (
              <span className="flex justify-end gap-4">
                {token.expiresAt === null ? (
                  <Button kind="quiet" onClick={() => onRotate(token)}>
                    Rotate
                  </Button>
                ) : null}
                <Button kind="quiet" onClick={() => onRevoke(token)}>
                  Revoke
                </Button>
              </span>
            ),
        },
      ]}
    />
  )
}

function State({ token, zone }: { token: Token; zone: string }) {
  if (token.revokedAt !== null) {
    return (
      <span className="text-mute">
        ended <Time at={token.revokedAt} zone={zone} />
      </span>
    )
  }
  if (token.expiresAt === null) return 'good'
  return (
    <span className="text-amber">
      being replaced, ends by <Time at={token.expiresAt} zone={zone} />
    </span>
  )
}
