'use client'

import { useRouter } from 'next/navigation'
import { useState } from 'react'
import type { Problem } from '@/components/ui/problem'
import { useRequest } from '@/components/ui/use-request'
import type { FiringDto } from '@/lib/firings/schema'
import type { TemperatureUnit } from '@/lib/format'
import { ApiProblem, callApi } from '@/lib/http/api-client'
import { FinishSheet, LossSheet, PhotoSheet } from './fireside-beside'
import type { FinishWords, SiteWords } from './fireside-finish'
import { nextToSend } from './fireside-mark-queue'
import type { MarkSender } from './fireside-mark-sender'
import { FiresideAbandon, FiresideMore } from './fireside-more'
import type { MoreProps, MoreStep } from './fireside-more'
import { FiresideNote } from './fireside-note'

export type FiresideSheetName =
  | 'who'
  | 'alarms'
  | 'more'
  | 'note'
  | 'finish'
  | 'loss'
  | 'photos'
  | 'abandon'
  | 'move'
  | 'swap'
  | 'why'
  | 'why, then finish'

/** The sheets over the fireside; the finish and the abandoning go to the server once every mark is there. */
export function FiresideSheets({
  sheet,
  onSheet,
  firing,
  zone,
  siteWords,
  endedHref,
  canRun,
  unit,
  areKeysOn,
  onKeysOn,
  sender,
  waitingCount,
  onTurn,
  moreSteps,
  sound,
  onNote,
  onChanged,
}: {
  sheet: FiresideSheetName | null
  onSheet: (sheet: FiresideSheetName | null) => void
  firing: FiringDto
  zone: string
  siteWords: SiteWords
  /** Where to go once the firing has ended. */
  endedHref: string
  canRun: boolean
  unit: TemperatureUnit
  areKeysOn: boolean
  onKeysOn: (isOn: boolean) => void
  sender: MarkSender
  waitingCount: number
  onTurn: () => void
  /** What is seldom done at this step. */
  moreSteps: readonly MoreStep[]
  sound: Pick<MoreProps, 'soundLevel' | 'onSoundLevel'>
  onNote: (words: string) => void
  onChanged: () => void
}) {
  const router = useRouter()
  const { isBusy, problem, send } = useRequest()
  const [isLeaving, setIsLeaving] = useState(false)
  const close = () => onSheet(null)

  const end = async (verb: 'finish' | 'abandon', body: FinishWords | { reason: string }) => {
    const isDone = await send(async () => {
      await sendWaiting(sender)
      await callApi('POST', `/api/firings/{id}/${verb}`, { params: { id: firing.id }, body })
    })
    if (!isDone) return
    setIsLeaving(true)
    onChanged()
    router.push(endedHref)
  }
  const besideSteps: MoreStep[] = [
    { label: 'Note a loss', onPress: () => onSheet('loss') },
    { label: 'Photos', onPress: () => onSheet('photos') },
  ]
  const shown: { isBusy: boolean; problem: Problem | null } = { isBusy: isBusy || isLeaving, problem }

  if (sheet === 'more') {
    return (
      <FiresideMore
        deskHref={endedHref === '/room' ? null : endedHref}
        canRun={canRun}
        areKeysOn={areKeysOn}
        onKeysOn={onKeysOn}
        onTurn={() => {
          onTurn()
          close()
        }}
        steps={canRun ? [...moreSteps, ...besideSteps] : moreSteps}
        {...sound}
        onAlarms={() => onSheet('alarms')}
        onAbandon={() => onSheet('abandon')}
        onClose={close}
      />
    )
  }
  if (sheet === 'note') {
    return (
      <FiresideNote
        onClose={close}
        onSave={(words) => {
          onNote(words)
          close()
        }}
      />
    )
  }
  if (sheet === 'abandon') {
    return (
      <FiresideAbandon {...shown} onAbandon={(reason) => void end('abandon', { reason })} onClose={close} />
    )
  }
  if (sheet === 'loss') return <LossSheet firing={firing} onClose={close} />
  if (sheet === 'photos') return <PhotoSheet firing={firing} zone={zone} onClose={close} />
  if (sheet !== 'finish') return null
  return (
    <FinishSheet
      {...shown}
      firing={firing}
      zone={zone}
      unit={unit}
      siteWords={siteWords}
      waitingCount={waitingCount}
      onFinish={(words) => void end('finish', words)}
      onClose={close}
    />
  )
}

/** @throws ApiProblem while marks wait: a firing that has ended takes none. */
async function sendWaiting(sender: MarkSender): Promise<void> {
  await sender.flush()
  if (nextToSend(sender.read()) === null) return
  throw new ApiProblem({
    title: 'Marks wait to be sent',
    status: 0,
    detail: 'They are kept here and sent as soon as the server answers. Then try again.',
    fields: {},
    current: undefined,
    retryAfterS: null,
  })
}
