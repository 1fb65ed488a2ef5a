'use client'

import { useState } from 'react'
import { doseShareWords, log10Words } from '@/components/probes/half-width-words'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import type { Problem } from '@/components/ui/problem'
import { SignDialog } from '@/components/ui/sign-dialog'
import type { StudyDto } from '@/lib/probes/study-schema'

type Verb = 'finish' | 'abandon' | 'adopt'

/** Finish by signature, abandon with a reason, adopt by signature. */
export function StudyActions({
  study,
  signerName,
  mayCheck,
  mayAdopt,
  onAct,
}: {
  study: StudyDto
  signerName: string
  mayCheck: boolean
  mayAdopt: boolean
  onAct: (verb: Verb, body: Record<string, string>) => Promise<Problem | null>
}) {
  const [open, setOpen] = useState<Verb | null>(null)
  const { result } = study

  async function act(verb: Verb, body: Record<string, string>) {
    const problem = await onAct(verb, body)
    if (problem === null) setOpen(null)
    return problem
  }

  const isOpen = study.state === 'open' && mayCheck
  const isAdoptable = study.state === 'finished' && study.adopted === null && mayAdopt
  return (
    <>
      {isOpen ? (
        <>
          <Button onClick={() => setOpen('abandon')}>Abandon</Button>
          <Button kind="main" disabled={result === null} onClick={() => setOpen('finish')}>
            Finish and sign
          </Button>
        </>
      ) : null}
      {isAdoptable ? (
        <Button kind="due" onClick={() => setOpen('adopt')}>
          Judge by it from now on
        </Button>
      ) : null}
      <ConfirmDialog
        isOpen={open === 'abandon'}
        onClose={() => setOpen(null)}
        title={`Abandon study ${study.number}?`}
        confirmLabel="Abandon"
        isDanger
        reasonLabel="Why"
        onConfirm={(reason) => act('abandon', { reason })}
      >
        Its placements stay on record and count for nothing.
      </ConfirmDialog>
      <SignDialog
        isOpen={open === 'finish'}
        onClose={() => setOpen(null)}
        title={`Finish study ${study.number}`}
        signerName={signerName}
        meaning="I placed the probe as for a firing each time, and these are the readings."
        signLabel="Sign and finish"
        onSign={({ password, meaning }) => act('finish', { password, meaning })}
      >
        {result === null ? null : (
          <p>
            {result.n} placements: {log10Words(result.halfWidthLog10)} in log10 of dose. No placement is added
            or struck out after this.
          </p>
        )}
      </SignDialog>
      <SignDialog
        isOpen={open === 'adopt'}
        onClose={() => setOpen(null)}
        title={`Judge by study ${study.number}`}
        signerName={signerName}
        meaning="I make these placements this site’s own same-mount repeatability."
        signLabel="Sign and judge by it"
        onSign={({ password, meaning }) => act('adopt', { password, meaning })}
      >
        {result === null ? null : (
          <p>
            A new version of the settings holds {log10Words(result.halfWidthLog10)} in log10 of dose (
            {doseShareWords(result.halfWidthLog10)}), measured. Scores from then on and the bench’s smallest
            tolerance go by it; scores that are made keep theirs.
          </p>
        )}
      </SignDialog>
    </>
  )
}
