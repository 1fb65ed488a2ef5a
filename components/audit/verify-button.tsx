'use client'

import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import { useRequest } from '@/components/ui/use-request'
import type { ChainDto } from '@/lib/audit/schema'
import { formatCount, formatInstant } from '@/lib/format'
import { callApi } from '@/lib/http/api-client'

/** Hashes the whole trail again and says whether it holds. */
export function VerifyButton({ timeZone }: { timeZone: string }) {
  const [chain, setChain] = useState<ChainDto | null>(null)
  const { isBusy, problem, send } = useRequest()
  const verify = () => send(async () => setChain(await callApi<ChainDto>('GET', '/api/audit-chain')))
  return (
    <section aria-label="Verification" className="mb-5">
      <Button kind="main" isBusy={isBusy} onClick={verify}>
        {isBusy ? 'Verifying' : 'Verify the chain'}
      </Button>
      <div role="status" className="mt-3 max-w-[48rem]">
        <FormError problem={problem} />
        {chain === null ? null : <ChainWords chain={chain} timeZone={timeZone} />}
      </div>
    </section>
  )
}

function ChainWords({ chain, timeZone }: { chain: ChainDto; timeZone: string }) {
  const at = formatInstant(chain.verifiedAt, timeZone)
  if (!chain.isIntact) {
    return (
      <Notice tone="wrong">
        <p className="font-[640]">The trail is broken at entry {chain.firstBrokenSeq}.</p>
        <p>
          That entry was changed, removed or put in from outside; the {chain.entries} before it hold ({at}).
          Keep the database as it is, and compare with your last backup.
        </p>
      </Notice>
    )
  }
  return (
    <Notice>
      <p>
        The trail holds: {formatCount(chain.entries, 'entry', 'entries')}, each with the hash of the one
        before ({at}).
      </p>
      <p className="mt-1 text-small text-soft">
        Note this elsewhere, and a later run can tell that nothing before was cut off:{' '}
        <code className="font-mono break-all">
          {chain.entries}:{chain.lastHash}
        </code>
      </p>
    </Notice>
  )
}
