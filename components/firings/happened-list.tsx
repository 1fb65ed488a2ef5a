import { capitalize } from '@/lib/format'
import type { ReactNode } from 'react'
import { storySentence } from '@/components/alarms/alarm-story'
import { silenceWords } from '@/components/firings/gap-words'
import { listWords } from '@/components/firings/mark-words'
import { countsAsAlarm } from '@/lib/alarms/alarm-kinds'
import { shownAlarmWords, splitAlarmWords } from '@/lib/alarms/alarm-words'
import type { FiringPicture } from '@/lib/firings/picture-types'
import type { FiringDto, MarkDto } from '@/lib/firings/schema'
import { formatInstant } from '@/lib/format'
import type { TemperatureUnit } from '@/lib/format'

type Line = { key: string; at: string; what: ReactNode; who: string }

/** A mark made this much after it is said to have been made late, s. */
const lateFromS = 60

/** What was done and what went missing, in order, each with its time and who says so. */
export function HappenedList({ picture, unit }: { picture: FiringPicture; unit: TemperatureUnit }) {
  const { firing, timeZone } = picture
  const lines = [
    ...phaseLines(firing),
    ...markLines(picture),
    ...gapLines(picture),
    ...alarmLines(picture, unit),
  ].sort((a, b) => a.at.localeCompare(b.at))
  return (
    <section>
      <h2 className="mb-1">
        What happened <span className="font-normal text-mute">{timeZone}</span>
      </h2>
      {lines.length === 0 ? (
        <p className="border-y border-line py-2 text-soft">Nothing yet.</p>
      ) : (
        <table className="w-full border-collapse">
          <caption className="sr-only">Marks, alarms and silences, times in {timeZone}</caption>
          <thead className="sr-only">
            <tr>
              <th scope="col">Time</th>
              <th scope="col">What</th>
              <th scope="col">Who</th>
            </tr>
          </thead>
          <tbody>
            {lines.map((line) => (
              <tr key={line.key} className="border-b border-line align-top">
                <td className="w-14 py-[5.5px] tabular-nums">
                  <time dateTime={line.at}>{formatInstant(line.at, timeZone, 'time')}</time>
                </td>
                <td className="py-[5.5px] pr-4">{line.what}</td>
                <td className="w-28 py-[5.5px] text-mute">{line.who}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </section>
  )
}

/** Start and end stand on the firing itself; the phases between are marks. */
function phaseLines(firing: FiringDto): Line[] {
  const who = firing.toaster?.name ?? ''
  const start = firing.preheatAt === null ? [] : [{ at: firing.preheatAt, what: 'Preheat began' }]
  const ended = firing.state === 'abandoned' ? `Abandoned: ${firing.endReason ?? ''}` : 'Finished'
  const end = firing.endedAt === null ? [] : [{ at: firing.endedAt, what: ended }]
  return [...start, ...end].map((line) => ({ key: line.what, who, ...line }))
}

function markLines({ firing, timeZone }: FiringPicture): Line[] {
  const replacedBy = new Map(firing.marks.map((mark) => [mark.replacesId, mark]))
  return firing.marks
    .filter((mark) => mark.kind !== 'undone')
    .map((mark) => ({
      key: mark.id,
      at: mark.at,
      who: mark.by,
      what: mark.isInForce ? (
        <MarkWords firing={firing} mark={mark} />
      ) : (
        <PutRight firing={firing} mark={mark} by={replacedBy.get(mark.id)} zone={timeZone} />
      ),
    }))
}

function MarkWords({ firing, mark }: { firing: FiringDto; mark: MarkDto }) {
  const lateS = (Date.parse(mark.recordedAt) - Date.parse(mark.at)) / 1000
  return (
    <>
      {listWords(firing, mark)}
      {lateS < lateFromS ? null : (
        <span className="text-mute"> (marked {Math.round(lateS / 60)} min late)</span>
      )}
    </>
  )
}

/** A mark that was corrected or taken back: kept, struck through, with what stands in its place. */
function PutRight({
  firing,
  mark,
  by,
  zone,
}: {
  firing: FiringDto
  mark: MarkDto
  by: MarkDto | undefined
  zone: string
}) {
  return (
    <>
      <del className="text-mute">{listWords(firing, mark)}</del>
      {by === undefined ? null : (
        <span className="block text-small text-soft">
          {by.kind === 'undone'
            ? `taken back by ${by.by}`
            : `put right by ${by.by}: ${listWords(firing, by)}, ${formatInstant(by.at, zone, 'time')}`}
        </span>
      )}
    </>
  )
}

/** Alarms with what became of them; reminders are left to the page of alarms. */
function alarmLines({ alarms }: FiringPicture, unit: TemperatureUnit): Line[] {
  return alarms
    .filter((alarm) => countsAsAlarm(alarm.kind))
    .map((alarm) => ({
      key: alarm.id,
      at: alarm.cameAt,
      what: (
        <>
          Alarm: {splitAlarmWords(shownAlarmWords(alarm.words, unit)).headline}
          <span className="block text-small text-soft">{storySentence(alarm)}</span>
        </>
      ),
      who: alarm.seen?.by ?? '',
    }))
}

function gapLines({ curves }: FiringPicture): Line[] {
  if (curves === null) return []
  const zeroMs = Date.parse(curves.zeroAt)
  return curves.leadGaps.map((gap, i) => ({
    key: `gap ${i}`,
    at: new Date(zeroMs + gap.startS * 1000).toISOString(),
    what: `${capitalize(curves.lead.name)} had no reading for ${silenceWords(gap)}`,
    who: 'gateway',
  }))
}
