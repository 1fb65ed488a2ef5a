'use client'

import { useState } from 'react'
import { TextField } from '@/components/ui/text-field'
import { formatInstant } from '@/lib/format'
import { siteInstant } from './site-instant'

export type WriteDay = { day: string; isToday: boolean; zone: string; nowMs: number }

/** The day and time of a reading in the site's zone: now, on today's page; to be written on another day's. */
export function useWhen({ day, isToday, zone, nowMs }: WriteDay) {
  const [date, setDate] = useState(day)
  const [time, setTime] = useState(isToday ? formatInstant(nowMs, zone, 'time') : '')
  const at = siteInstant(date, time, zone)
  return { date, setDate, time, setTime, at, fault: at === null ? 'Write the time as 13:41.' : undefined }
}

export function WhenFields({
  when,
  zone,
  error,
}: {
  when: ReturnType<typeof useWhen>
  zone: string
  error: string | undefined
}) {
  return (
    <div className="grid grid-cols-2 gap-4">
      <TextField
        name="date"
        label="Day"
        type="date"
        required
        value={when.date}
        onChange={(event) => when.setDate(event.target.value)}
      />
      <TextField
        name="at"
        label="Time"
        type="time"
        required
        hint={zone}
        value={when.time}
        onChange={(event) => when.setTime(event.target.value)}
        error={error}
      />
    </div>
  )
}
