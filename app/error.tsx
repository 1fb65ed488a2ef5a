'use client'

import { FailedPage } from '@/components/ui/failed-page'

/** Stands in for a page whose rendering failed. */
export default function PageError({ error }: { error: unknown }) {
  const digest = error instanceof Error ? Reflect.get(error, 'digest') : undefined
  return (
    <FailedPage
      title="This page did not come up"
      number={typeof digest === 'string' ? digest : undefined}
      onRetry={() => window.location.reload()}
    />
  )
}
