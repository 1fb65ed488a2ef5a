import type { Actor } from '@/lib/auth/actor'
import { requirePermission } from '@/lib/auth/permissions'
import { countKept } from '@/lib/conditions/count-kept'
import { readExposureFile } from '@/lib/conditions/read-exposure-file'
import type { ExposureFile, ExposurePreview } from '@/lib/conditions/schema'
import { forkEm } from '@/lib/db/orm'
import { nowMs } from '@/lib/runtime'
import { foldToMinutes } from '@/lib/science/exposure-record'
import { currentSite } from '@/lib/site/current-site'

const sampleLines = 8
const shownFaults = 50

/** What a meter's file would give, and every line of it that cannot be read; keeps nothing. */
export async function previewExposureFile(actor: Actor, input: ExposureFile): Promise<ExposurePreview> {
  requirePermission(actor, 'conditions:write')
  const em = await forkEm()
  const site = await currentSite(em)
  const timeZone = input.zone === 'UTC' ? 'UTC' : site.timeZone
  const file = readExposureFile(input.text, { ...input, timeZone, nowMs: nowMs() })
  const minutes = foldToMinutes(file.readings)
  const first = minutes[0]
  const last = minutes.at(-1)
  return {
    columns: file.columns,
    chosen: file.chosen,
    lineCount: file.lineCount,
    readingCount: file.readings.length,
    minuteCount: minutes.length,
    alreadyThere: await countKept(em, input, minutes),
    firstAt: first === undefined ? null : new Date(first.atMs).toISOString(),
    lastAt: last === undefined ? null : new Date(last.atMs).toISOString(),
    peak: minutes.length === 0 ? null : minutes.reduce((most, { peak }) => Math.max(most, peak), -Infinity),
    sample: file.readings.slice(0, sampleLines).map(({ line, atMs, value }) => ({
      line,
      at: new Date(atMs).toISOString(),
      value,
    })),
    faults: file.faults.slice(0, shownFaults),
    faultCount: file.faults.length,
  }
}
