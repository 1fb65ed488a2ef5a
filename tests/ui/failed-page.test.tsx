import { cleanup, render, screen } from '@testing-library/react'
import { afterEach, describe, expect, it, vi } from 'vitest'
import { FailedPage } from '@/components/ui/failed-page'

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
})

describe('a page that failed', () => {
  it('says that the database is not answering when that is why', async () => {
    vi.stubGlobal('fetch', vi.fn().mockResolvedValue(new Response(null, { status: 503 })))
    render(<FailedPage title="This page did not come up" onRetry={() => {}} />)
    expect(await screen.findByRole('heading', { name: 'The database is not answering' })).toBeTruthy()
    expect(screen.getByText(/nothing is lost/)).toBeTruthy()
  })

  it('says the number of the log line when it is something else', async () => {
    const asked = vi.fn().mockResolvedValue(new Response(null, { status: 200 }))
    vi.stubGlobal('fetch', asked)
    render(<FailedPage title="This page did not come up" number="1234" onRetry={() => {}} />)
    await vi.waitFor(() => expect(asked).toHaveBeenCalled())
    expect(screen.getByRole('heading', { name: 'This page did not come up' })).toBeTruthy()
    expect(screen.getByText(/the number 1234/)).toBeTruthy()
  })
})
