'use client'

import { useEffect, useState } from 'react'
import type { LinkDto } from '@/lib/accounts/schema'
import { callApi, problemOf } from '@/lib/http/api-client'

export type LinkState =
  { kind: 'reading' } | { kind: 'spent'; detail: string } | { kind: 'open'; token: string; link: LinkDto }

/** Reads the token from the address's fragment (or query) and asks what it is for, without using it. */
export function useLink(): LinkState {
  const [state, setState] = useState<LinkState>({ kind: 'reading' })
  useEffect(() => {
    let isGone = false
    const token = tokenOf(window.location)
    callApi<LinkDto>('POST', '/api/account-links/inspect', { body: { token } })
      .then((link) => (isGone ? undefined : setState({ kind: 'open', token, link })))
      .catch((error: unknown) =>
        isGone ? undefined : setState({ kind: 'spent', detail: problemOf(error).detail }),
      )
    return () => {
      isGone = true
    }
  }, [])
  return state
}

function tokenOf({ hash, search }: { hash: string; search: string }): string {
  const inHash = new URLSearchParams(hash.replace(/^#/, '')).get('token')
  return inHash ?? new URLSearchParams(search).get('token') ?? ''
}
