'use client'

import { useState } from 'react'
import type { FormEvent, ReactNode } from 'react'
import { Button } from './button'
import { Dialog } from './dialog'
import { FormError } from './form-error'
import type { Problem } from './problem'
import { TextArea } from './text-area'
import { TextField } from './text-field'

export type SignDialogProps = {
  isOpen: boolean
  onClose: () => void
  /** What is signed: "Approve Quay medium, version 5". */
  title: ReactNode
  /** Who signs, as the signature will name them. */
  signerName: string
  /** The meaning of the signature, in the first person: "I have checked this version and approve it for firing." */
  meaning: string
  /** The verb: "Sign and approve". */
  signLabel: string
  /** More to read or fill before signing. */
  children?: ReactNode
  /** Ask for a reason; its label. */
  reasonLabel?: string
  isReasonRequired?: boolean
  /** Signs. Answers a problem to show (a wrong password names the field "password"), or null when done. */
  onSign: (signature: { password: string; meaning: string; reason: string }) => Promise<Problem | null>
}

/** A signature: the password again, the name, and the meaning in words. */
export function SignDialog(props: SignDialogProps) {
  return props.isOpen ? <OpenSignDialog {...props} /> : null
}

function OpenSignDialog({
  onClose,
  title,
  signerName,
  meaning,
  signLabel,
  children,
  reasonLabel,
  isReasonRequired = false,
  onSign,
}: SignDialogProps) {
  const [password, setPassword] = useState('')
  const [reason, setReason] = useState('')
  const [errors, setErrors] = useState<Readonly<Record<string, string>>>({})
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)

  async function sign(event: FormEvent) {
    event.preventDefault()
    const missing = findMissing(password, reasonLabel !== undefined && isReasonRequired ? reason : null)
    setErrors(missing)
    if (Object.keys(missing).length > 0) return
    setIsBusy(true)
    const answer = await onSign({ password, meaning, reason: reason.trim() })
    setIsBusy(false)
    setProblem(answer)
    setErrors(answer?.fields ?? {})
  }

  return (
    <Dialog isOpen onClose={onClose} title={title} isBusy={isBusy}>
      <form method="post" onSubmit={sign} noValidate>
        <FormError problem={problem} />
        {children}
        {reasonLabel === undefined ? null : (
          <TextArea
            name="reason"
            id="sign-reason"
            className="mt-3"
            label={reasonLabel}
            isOptional={!isReasonRequired}
            rows={3}
            maxLength={2000}
            value={reason}
            onChange={(event) => setReason(event.target.value)}
            error={errors.reason}
          />
        )}
        <p className="mt-4 border-t border-line pt-3">
          <span className="block text-small text-soft">You sign as {signerName}:</span>
          <span className="font-[560]">{meaning}</span>
        </p>
        <TextField
          name="password"
          id="sign-password"
          className="mt-3"
          type="password"
          label="Your password, again"
          autoComplete="current-password"
          value={password}
          onChange={(event) => setPassword(event.target.value)}
          error={errors.password}
        />
        <div className="mt-5 flex flex-wrap justify-end gap-2">
          <Button onClick={onClose} disabled={isBusy}>
            Cancel
          </Button>
          <Button type="submit" kind="due" isBusy={isBusy}>
            {isBusy ? 'Signing' : signLabel}
          </Button>
        </div>
      </form>
    </Dialog>
  )
}

function findMissing(password: string, reason: string | null): Record<string, string> {
  const missing: Record<string, string> = {}
  if (password === '') missing.password = 'Write your password again; it makes this your signature.'
  if (reason !== null && reason.trim() === '')
    missing.reason = 'Write a reason; it is kept with the signature.'
  return missing
}
