'use client'

import { useEffect, useState } from 'react'
import { Button } from '@/components/ui/button'

const askEveryMs = 4_000

/** Asks the server whether its database answers; null until it is known. */
async function isDatabaseAway(): Promise<boolean | null> {
  const answer = await fetch('/api/health/ready', { cache: 'no-store' }).catch(() => null)
  return answer === null ? null : answer.status === 503
}

/**
 * In place of a page that failed. When the database is what does not answer, it says so and comes back by itself;
 * otherwise the server's log line carries the same number, and the cause itself stays inside.
 */
export function FailedPage({
  title,
  number,
  onRetry,
}: {
  title: string
  number?: string
  onRetry: () => void
}) {
  const [isAway, setIsAway] = useState<boolean | null>(null)
  useEffect(() => {
    let isOver = false
    let wasAway = false
    const ask = async () => {
      const away = await isDatabaseAway()
      if (isOver || away === null) return
      setIsAway(away)
      if (wasAway && !away) window.location.reload()
      wasAway = away
    }
    void ask()
    const timer = setInterval(() => void ask(), askEveryMs)
    return () => {
      isOver = true
      clearInterval(timer)
    }
  }, [])
  return (
    <div className="mx-auto max-w-[34rem] px-7 pt-[12vh]" role="alert">
      <h1>{isAway === true ? 'The database is not answering' : title}</h1>
      <p className="mt-3">
        {isAway === true
          ? 'Readings wait in the gateways and nothing is lost. This page comes back by itself once the database answers; watch the fire itself meanwhile.'
          : `The fault is ours. Readings go on being kept by the gateways meanwhile. Try again; if it stays, tell your administrator${number === undefined ? '' : ` the number ${number}`}.`}
      </p>
      <p className="mt-4">
        <Button kind="due" onClick={onRetry}>
          Try again
        </Button>
      </p>
    </div>
  )
}
