import { act, cleanup, render, screen, within } from '@testing-library/react'
import userEvent from '@testing-library/user-event'
import { useState } from 'react'
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import type { Problem } from '@/components/ui/problem'
import { SignDialog } from '@/components/ui/sign-dialog'
import { TOAST_S, ToastProvider, useToast } from '@/components/ui/toast'

afterEach(cleanup)

function Withdraw({ onConfirm }: { onConfirm: (reason: string) => Promise<Problem | null> }) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <>
      <button type="button" onClick={() => setIsOpen(true)}>
        Open
      </button>
      <ConfirmDialog
        isOpen={isOpen}
        onClose={() => setIsOpen(false)}
        title="Withdraw version 4?"
        confirmLabel="Withdraw"
        isDanger
        reasonLabel="Why"
        onConfirm={async (reason) => {
          const problem = await onConfirm(reason)
          if (problem === null) setIsOpen(false)
          return problem
        }}
      >
        <p>Firings under way go on.</p>
      </ConfirmDialog>
    </>
  )
}

describe('a dialog that asks before something that hurts', () => {
  test('is named by its question, and gives the focus back when it closes', async () => {
    render(<Withdraw onConfirm={async () => null} />)
    const opener = screen.getByText('Open')
    opener.focus()
    await userEvent.click(opener)
    expect(screen.getByRole('dialog', { name: 'Withdraw version 4?' })).toBeTruthy()
    await userEvent.click(screen.getByText('Cancel'))
    expect(screen.queryByRole('dialog')).toBeNull()
    expect(document.activeElement).toBe(opener)
  })

  test('does nothing without the reason it asks for', async () => {
    const confirm = vi.fn(async () => null)
    render(<Withdraw onConfirm={confirm} />)
    await userEvent.click(screen.getByText('Open'))
    await userEvent.click(screen.getByText('Withdraw'))
    expect(confirm).not.toHaveBeenCalled()
    expect(screen.getByText('Write a reason; it goes into the audit trail.')).toBeTruthy()
  })

  test('shows a refusal and loses nothing typed', async () => {
    render(
      <Withdraw
        onConfirm={async () => ({ title: 'Not withdrawn', detail: 'Somebody withdrew it meanwhile.' })}
      />,
    )
    await userEvent.click(screen.getByText('Open'))
    await userEvent.type(screen.getByLabelText('Why'), 'wrong lot')
    await userEvent.click(screen.getByText('Withdraw'))
    expect(await screen.findByText('Somebody withdrew it meanwhile.')).toBeTruthy()
    expect(screen.getByLabelText<HTMLTextAreaElement>('Why').value).toBe('wrong lot')
  })
})

describe('a signature', () => {
  const meaning = 'I have checked this version and approve it for firing.'

  test('shows who signs and what it means, and asks for the password', async () => {
    const sign = vi.fn(async () => null)
    render(
      <SignDialog
        isOpen
        onClose={() => undefined}
        title="Approve version 5"
        signerName="I. Marr, master cooper"
        meaning={meaning}
        signLabel="Sign"
        onSign={sign}
      />,
    )
    const dialog = within(screen.getByRole('dialog'))
    expect(dialog.getByText(meaning)).toBeTruthy()
    expect(dialog.getByText('You sign as I. Marr, master cooper:')).toBeTruthy()
    await userEvent.click(dialog.getByText('Sign'))
    expect(sign).not.toHaveBeenCalled()
    await userEvent.type(dialog.getByLabelText('Your password, again'), 'a long pass phrase')
    await userEvent.click(dialog.getByText('Sign'))
    expect(sign).toHaveBeenCalledWith({ password: 'a long pass phrase', meaning, reason: '' })
  })

  test('puts a refused password beside its field', async () => {
    const refused = {
      detail: 'Not signed.',
      fields: { password: 'This is not the password of this account.' },
    }
    render(
      <SignDialog
        isOpen
        onClose={() => undefined}
        title="Approve"
        signerName="I. Marr"
        meaning={meaning}
        signLabel="Sign"
        onSign={async () => refused}
      />,
    )
    await userEvent.type(screen.getByLabelText('Your password, again'), 'wrong')
    await userEvent.click(screen.getByText('Sign'))
    const field = screen.getByLabelText('Your password, again')
    expect(document.getElementById(`${field.id}-error`)?.textContent).toBe(
      'This is not the password of this account.',
    )
  })
})

describe('what was just done', () => {
  beforeEach(() => void vi.useFakeTimers())
  afterEach(() => void vi.useRealTimers())

  function Mark({ onUndo }: { onUndo: () => void }) {
    const show = useToast()
    return (
      <button type="button" onClick={() => show({ words: 'Feed marked.', onUndo })}>
        Feed
      </button>
    )
  }
  const press = (name: RegExp | string) => act(() => screen.getByRole('button', { name }).click())

  test('can be undone for ten seconds and no longer', () => {
    const undo = vi.fn()
    render(
      <ToastProvider>
        <Mark onUndo={undo} />
      </ToastProvider>,
    )
    press('Feed')
    act(() => void vi.advanceTimersByTime((TOAST_S - 1) * 1000))
    press(/^Undo/)
    expect(undo).toHaveBeenCalledTimes(1)
    expect(screen.queryByText('Feed marked.')).toBeNull()
    press('Feed')
    for (let s = 0; s < TOAST_S; s += 1) act(() => void vi.advanceTimersByTime(1000))
    expect(screen.queryByText('Feed marked.')).toBeNull()
    expect(TOAST_S).toBe(10)
  })

  test('waits while a person has the focus in it', () => {
    render(
      <ToastProvider>
        <Mark onUndo={() => undefined} />
      </ToastProvider>,
    )
    press('Feed')
    act(() => screen.getByRole('button', { name: /^Undo/ }).focus())
    for (let s = 0; s < 30; s += 1) act(() => void vi.advanceTimersByTime(1000))
    expect(screen.getByText('Feed marked.')).toBeTruthy()
  })
})
