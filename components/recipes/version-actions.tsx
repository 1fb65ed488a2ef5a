'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import { Button } from '@/components/ui/button'
import { ConfirmDialog } from '@/components/ui/confirm-dialog'
import { FormError } from '@/components/ui/form-error'
import { Notice } from '@/components/ui/notice'
import type { Problem } from '@/components/ui/problem'
import { SignDialog } from '@/components/ui/sign-dialog'
import { useToast } from '@/components/ui/toast'
import { formatCount } from '@/lib/format'
import { tryApi } from '@/lib/http/api-client'
import { cautionAboveC, hotWoodCaution } from '@/lib/recipes/cautions'
import type { RecipeVersionDto, WithdrawnVersionDto } from '@/lib/recipes/schema'

export type VersionRights = {
  personName: string
  isAuthor: boolean
  canWrite: boolean
  canApprove: boolean
  /** Another version of the recipe that is a draft or in review, or null. */
  openVersion: { id: string; number: number } | null
}

type Ask = 'approve' | 'return' | 'withdraw' | null

/** What may be done with a version that is no draft; each act asks first. */
export function VersionActions({ version, rights }: { version: RecipeVersionDto; rights: VersionRights }) {
  const router = useRouter()
  const toast = useToast()
  const [ask, setAsk] = useState<Ask>(null)
  const [problem, setProblem] = useState<Problem | null>(null)
  const [isBusy, setIsBusy] = useState(false)
  const name = `${version.recipeName}, version ${version.number}`
  const isReleased = version.state === 'approved' || version.state === 'superseded'
  const isWaiting = version.state === 'in review'

  async function post<Answer>(verb: string, body: Readonly<Record<string, unknown>>) {
    return tryApi<Answer>('POST', `/api/recipe-versions/{id}/${verb}`, { params: { id: version.id }, body })
  }

  function done(words: string): null {
    setAsk(null)
    toast({ words })
    router.refresh()
    return null
  }

  async function takeBack() {
    setIsBusy(true)
    const answer = await post<RecipeVersionDto>('take-back', { revision: version.revision })
    setIsBusy(false)
    setProblem(answer.problem)
    if (answer.problem === null) done(`Version ${version.number} is a draft again.`)
  }

  async function startNew() {
    if (rights.openVersion !== null) {
      router.push(`/recipe-versions/${rights.openVersion.id}`)
      return
    }
    setIsBusy(true)
    const answer = await tryApi<RecipeVersionDto>('POST', '/api/recipes/{id}/versions', {
      params: { id: version.recipeId },
      body: { fromVersionId: version.id },
    })
    setIsBusy(false)
    setProblem(answer.problem)
    if (answer.data !== null) router.push(`/recipe-versions/${answer.data.id}`)
  }

  async function withdraw({ password, meaning, reason }: Signature): Promise<Problem | null> {
    const answer = await post<WithdrawnVersionDto>('withdraw', { password, meaning, reason })
    return answer.problem ?? done(withdrawnWords(answer.data))
  }

  async function approve({ password, meaning, reason }: Signature): Promise<Problem | null> {
    const answer = await post<RecipeVersionDto>('approve', {
      password,
      meaning,
      revision: version.revision,
      ...(reason === '' ? {} : { reason }),
    })
    return answer.problem ?? done(`Version ${version.number} is approved and may be fired.`)
  }

  async function sendBack(reason: string): Promise<Problem | null> {
    const answer = await post<RecipeVersionDto>('return', { reason, revision: version.revision })
    return answer.problem ?? done(`Version ${version.number} is with ${version.author.name} again.`)
  }

  return (
    <div>
      <div className="flex flex-wrap justify-end gap-2">
        {isWaiting && rights.isAuthor ? (
          <Button onClick={takeBack} isBusy={isBusy}>
            Take back
          </Button>
        ) : null}
        {isReleased && rights.canApprove ? (
          <Button onClick={() => setAsk('withdraw')}>Withdraw</Button>
        ) : null}
        {!isWaiting && rights.canWrite ? (
          <Button kind="main" onClick={startNew} isBusy={isBusy}>
            {rights.openVersion === null
              ? 'New version from this'
              : `Open version ${rights.openVersion.number}`}
          </Button>
        ) : null}
        {isWaiting && rights.canApprove && !rights.isAuthor ? (
          <>
            <Button onClick={() => setAsk('return')}>Return</Button>
            <Button kind="due" onClick={() => setAsk('approve')}>
              Approve
            </Button>
          </>
        ) : null}
      </div>
      <FormError problem={problem} />
      <ApproveDialog
        name={name}
        version={version}
        rights={rights}
        isOpen={ask === 'approve'}
        onClose={() => setAsk(null)}
        onSign={approve}
      />
      <ConfirmDialog
        isOpen={ask === 'return'}
        onClose={() => setAsk(null)}
        title={`Return version ${version.number} to ${version.author.name}?`}
        confirmLabel="Return"
        reasonLabel="What should change"
        onConfirm={sendBack}
      >
        It becomes a draft again, and {version.author.name} finds your reason on it.
      </ConfirmDialog>
      <SignDialog
        isOpen={ask === 'withdraw'}
        onClose={() => setAsk(null)}
        title={`Withdraw ${name}`}
        signerName={rights.personName}
        meaning="I withdraw this version: it may not be fired any more."
        signLabel="Sign and withdraw"
        reasonLabel="Why"
        isReasonRequired
        onSign={withdraw}
      >
        <p>
          Nothing can be fired with it from now on, and it cannot be brought back. Firings under way go on.
          Batches that wait for it are named when it is done.
        </p>
      </SignDialog>
    </div>
  )
}

type Signature = { password: string; meaning: string; reason: string }

function ApproveDialog({
  name,
  version,
  rights,
  isOpen,
  onClose,
  onSign,
}: {
  name: string
  version: RecipeVersionDto
  rights: VersionRights
  isOpen: boolean
  onClose: () => void
  onSign: (signature: Signature) => Promise<Problem | null>
}) {
  const isHot = version.content.limits.woodMaximumC > cautionAboveC
  return (
    <SignDialog
      isOpen={isOpen}
      onClose={onClose}
      title={`Approve ${name}`}
      signerName={rights.personName}
      meaning="I have checked this version and approve it for firing."
      signLabel="Sign and approve"
      reasonLabel={isHot ? 'Why the wood may get this hot' : 'Remark'}
      isReasonRequired={isHot}
      onSign={onSign}
    >
      <p>It is frozen for ever, and takes the place of the version approved before it.</p>
      {isHot ? (
        <Notice tone="attention" className="mt-2">
          {hotWoodCaution}
        </Notice>
      ) : null}
    </SignDialog>
  )
}

/** What waits for the version that was withdrawn, so that it can be given another. */
function withdrawnWords({ number, touched }: WithdrawnVersionDto): string {
  const count = touched.queuedFirings.length
  if (count === 0) return `Version ${number} is withdrawn. Nothing was waiting for it.`
  const batches = touched.batches.map((batch) => `batch ${batch.number} (${batch.unfiredCount})`).join(', ')
  return `Version ${number} is withdrawn. ${formatCount(count, 'piece')} waiting for it cannot be fired: ${batches}.`
}
