import { cleanup, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { afterEach, describe, expect, test, vi } from 'vitest'
import { GatewayTokens } from '@/components/probes/gateway-tokens'
import { FormDialog } from '@/components/ui/form-dialog'
import { ToastProvider } from '@/components/ui/toast'

const router = { refresh: vi.fn(), push: vi.fn() }
vi.mock('next/navigation', () => ({ useRouter: () => router }))

afterEach(() => {
  cleanup()
  vi.unstubAllGlobals()
  router.refresh.mockClear()
})

type Sent = { method: string | undefined; url: string; body: unknown }

/** Answers every request alike and keeps what was sent. */
function stubServer(status: number, answer: unknown): Sent[] {
  const sent: Sent[] = []
  vi.stubGlobal('fetch', async (url: string, init?: RequestInit) => {
    sent.push({
      method: init?.method,
      url,
      body: typeof init?.body === 'string' ? JSON.parse(init.body) : null,
    })
    return new Response(status === 204 ? null : JSON.stringify(answer), { status })
  })
  return sent
}

function CheckInFahrenheit({ name = 'Bilge A' }: { name?: string }) {
  return (
    <FormDialog
      openLabel="Check"
      openFor={name}
      title={`Check ${name}`}
      submitLabel="Record the check"
      method="POST"
      path="/api/probes/1/checks"
      personUnit="F"
      fields={[
        { name: 'label', label: 'Label', kind: 'text', defaultValue: name },
        { name: 'measuredTempC', label: 'The probe read', kind: 'temperature' },
        { name: 'uncertaintyC', label: 'Uncertainty', kind: 'difference' },
      ]}
    />
  )
}

describe('a dialog of fields', () => {
  test('sends temperatures typed in °F as °C, and differences without the 32', async () => {
    const sent = stubServer(201, { id: '1' })
    render(<CheckInFahrenheit />)
    await userEvent.click(screen.getByRole('button', { name: 'Check Bilge A' }))
    await userEvent.type(screen.getByLabelText('The probe read'), '401')
    await userEvent.type(screen.getByLabelText('Uncertainty'), '1,8')
    await userEvent.click(screen.getByRole('button', { name: 'Record the check' }))
    expect(sent).toEqual([
      {
        method: 'POST',
        url: '/api/probes/1/checks',
        body: { label: 'Bilge A', measuredTempC: 205, uncertaintyC: 1 },
      },
    ])
    expect(screen.queryByRole('dialog')).toBeNull()
    expect(router.refresh).toHaveBeenCalledOnce()
  })

  test('keeps what was typed when it is refused, and says the bound in the person’s unit', async () => {
    stubServer(422, {
      title: 'Something needs mending',
      detail: 'Look at the fields.',
      fields: { measuredTempC: 'Up to 400 °C.', uncertaintyC: 'Up to 10 °C.' },
    })
    render(<CheckInFahrenheit />)
    await userEvent.click(screen.getByRole('button', { name: 'Check Bilge A' }))
    await userEvent.type(screen.getByLabelText('The probe read'), '900')
    await userEvent.click(screen.getByRole('button', { name: 'Record the check' }))
    expect(screen.getByLabelText('The probe read')).toHaveProperty('value', '900')
    expect(screen.getAllByText(/Up to 752 °F/).length).toBeGreaterThan(0)
    expect(screen.getAllByText(/Up to 18 °F/).length).toBeGreaterThan(0)
  })

  test('begins with what holds now when it is opened again, unless something was typed', async () => {
    const { rerender } = render(<CheckInFahrenheit />)
    rerender(<CheckInFahrenheit name="Bilge C" />)
    await userEvent.click(screen.getByRole('button', { name: 'Check Bilge C' }))
    expect(screen.getByLabelText('Label')).toHaveProperty('value', 'Bilge C')
    await userEvent.type(screen.getByLabelText('Label'), '!')
    await userEvent.click(screen.getByRole('button', { name: 'Cancel' }))
    await userEvent.click(screen.getByRole('button', { name: 'Check Bilge C' }))
    expect(screen.getByLabelText('Label')).toHaveProperty('value', 'Bilge C!')
  })
})

describe('a gateway’s tokens', () => {
  const token = {
    id: 't1',
    createdAt: '2026-03-01T10:00:00.000Z',
    createdBy: 'P. Quill',
    lastUsedAt: null,
    revokedAt: null,
    expiresAt: null,
  }

  function Tokens() {
    return (
      <ToastProvider>
        <GatewayTokens
          gateway={{ id: 'g1', name: 'Shed', isRetired: false }}
          tokens={[token]}
          zone="Europe/London"
        />
      </ToastProvider>
    )
  }

  test('a new one is shown once, after asking', async () => {
    const sent = stubServer(201, { id: 't2', token: 'emb_secret' })
    render(<Tokens />)
    await userEvent.click(screen.getByRole('button', { name: 'New token' }))
    await userEvent.click(screen.getByRole('button', { name: 'Make the token' }))
    expect(sent.map((one) => [one.method, one.url])).toEqual([['POST', '/api/gateways/g1/tokens']])
    expect(screen.getByLabelText('Device token')).toHaveProperty('value', 'emb_secret')
    await userEvent.click(screen.getByRole('button', { name: 'Done' }))
    expect(screen.queryByLabelText('Device token')).toBeNull()
  })

  test('a code to enrol is shown once, with the time it ends', async () => {
    const sent = stubServer(201, { code: 'K7QW-3M9X-TR4H', expiresAt: '2026-03-01T10:30:00.000Z' })
    render(<Tokens />)
    await userEvent.click(screen.getByRole('button', { name: 'Make a code to enrol' }))
    await userEvent.click(screen.getByRole('button', { name: 'Make the code' }))
    expect(sent.map((one) => [one.method, one.url])).toEqual([['POST', '/api/gateways/g1/enrolment-codes']])
    expect(screen.getByLabelText('Code')).toHaveProperty('value', 'K7QW-3M9X-TR4H')
    expect(screen.getByText(/before 10:30/)).toBeTruthy()
  })

  test('one is rotated after asking, and the new one shown once', async () => {
    const sent = stubServer(201, { id: 't2', token: 'emb_next' })
    render(<Tokens />)
    await userEvent.click(screen.getByRole('button', { name: 'Rotate' }))
    const asked = screen.getByRole('dialog', { name: 'Rotate a token of Shed?' })
    await userEvent.click(within(asked).getByRole('button', { name: 'Rotate' }))
    expect(sent.map((one) => [one.method, one.url])).toEqual([['POST', '/api/gateways/g1/tokens/t1/rotate']])
    expect(screen.getByLabelText('Device token')).toHaveProperty('value', 'emb_next')
  })

  test('one is revoked after asking', async () => {
    const sent = stubServer(204, null)
    render(<Tokens />)
    await userEvent.click(screen.getByRole('button', { name: 'Revoke' }))
    const asked = screen.getByRole('dialog', { name: 'Revoke this token?' })
    await userEvent.click(within(asked).getByRole('button', { name: 'Revoke' }))
    expect(sent.map((one) => [one.method, one.url])).toEqual([['DELETE', '/api/gateways/g1/tokens/t1']])
  })
})
