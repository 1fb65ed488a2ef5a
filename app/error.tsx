'use client'

import { Button } from '@/components/ui/button'

/** The server's log line carries the same digest; the cause itself stays inside. */
export default function PageError({ error, retry }: { error: unknown; retry: () => void }) {
  const digest = error instanceof Error ? Reflect.get(error, 'digest') : undefined
  return (
    <div className="mx-auto max-w-[34rem] px-7 pt-[12vh]">
      <h1>This page did not come up</h1>
      <p className="mt-3">
        The fault is ours. Readings go on being kept by the gateways meanwhile. Try again; if it stays, tell
        your administrator{typeof digest === 'string' ? ` the number ${digest}` : ''}.
      </p>
      <p className="mt-4">
        <Button kind="due" onClick={() => retry()}>
          Try again
        </Button>
      </p>
    </div>
  )
}
