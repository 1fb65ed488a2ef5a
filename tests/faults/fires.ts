import { setTimeout as sleep } from 'node:timers/promises'
import { finishFiring } from '@/lib/firings/finish-firing'
import { compensatedTempC } from '@/lib/science/thermocouple'
import { equivalentMinutes } from '@/lib/science/heat-dose'
import { defaultSiteRules } from '@/lib/science/site-rules'
import type { GatewayRig, Rig } from '@/tests/faults/rig'
import { retried } from '@/tests/faults/store'
import type { Viewer } from '@/tests/faults/viewer'
import { openViewer } from '@/tests/faults/viewer'
import { swingMs } from '@/tests/faults/wood'
import { testOrigin } from '@/tests/support/environment'
import { createTestSession } from '@/tests/support/people'
import { createTestFiring } from '@/tests/support/room'

/** A live firing of the suite, on one gateway's probes, with those who look at it. */
export type Fire = {
  id: string
  gateway: GatewayRig
  toastMs: number
  endedMs: number | null
  viewers: Viewer[]
}

/** A toast that begins where the wood's swing is lowest, under the base of the dose. */
export async function lightFire(rig: Rig, gateway: GatewayRig, toastMs: number): Promise<Fire> {
  const [lead, opposite, coals] = gateway.probes
  if (lead === undefined || opposite === undefined || coals === undefined) throw new Error('three probes')
  // A statement that PostgreSQL's end took away is seen before anything was written.
  await retried(() => rig.store.query('select 1'))
  const { toaster, customers } = rig.people
  const firing = await createTestFiring({
    accountId: toaster.accountId,
    customerId: customers.first.id,
    state: 'toasting',
    preheatAt: new Date(toastMs),
    toastAt: new Date(toastMs),
    probes: { lead: lead.id, opposite: opposite.id, coals: coals.id },
  })
  return { id: firing.id, gateway, toastMs, endedMs: null, viewers: [] }
}

export async function gatherViewers(rig: Rig, fire: Fire, count: number): Promise<void> {
  for (let i = 0; i < count; i += 1) {
    const { cookie } = await createTestSession(rig.people.toaster.accountId)
    const options = { url: rig.lines.viewers.url, origin: testOrigin, cookie, firingId: fire.id }
    fire.viewers.push(openViewer(options))
  }
}

/** Where the last swing began that is wholly acknowledged. */
export function lastSwingMs(rig: Rig, fire: Fire): number {
  rig.readLogs()
  const newestMs = rig.ledger.newestAckedMs(fire.gateway.identity.gatewayId)
  return Math.floor((newestMs - 2_000) / swingMs) * swingMs
}

/** Ends the firing at the last whole swing, and lights the next on the same probes. */
export async function endAndLight(rig: Rig, fire: Fire): Promise<Fire> {
  const endedMs = lastSwingMs(rig, fire)
  const words = { colour: null, smell: null, outsideTempC: null, remarks: '' }
  const when = { id: fire.id, at: new Date(endedMs).toISOString() }
  await retried(() => finishFiring(rig.people.toaster.actor, { ...when, ...words }))
  fire.endedMs = endedMs
  const next = await lightFire(rig, fire.gateway, endedMs)
  next.viewers = fire.viewers
  return next
}

export type LeadReadings = Map<number, number>

/** The lead probe's stored readings from the toast start on: °C by instant, converted as SCIENCE §1 says. */
export async function storedLead(rig: Rig, fire: Fire): Promise<LeadReadings> {
  const rows = await rig.store.query<{ at_ms: string; emf_tenth_uv: number; cold_centi_c: number }>(
    'select at_ms, emf_tenth_uv, cold_centi_c from readings where probe_no = $1 and at_ms >= $2 and at_ms < $3',
    [fire.gateway.probes[0]?.no, fire.toastMs, fire.endedMs ?? 1e13],
  )
  const readings: LeadReadings = new Map()
  for (const row of rows) {
    const tempC = compensatedTempC('K', row.emf_tenth_uv / 10_000, row.cold_centi_c / 100)
    const atMs = Number(row.at_ms)
    // Of two at one instant the warmer stands.
    readings.set(atMs, Math.max(tempC, readings.get(atMs) ?? -Infinity))
  }
  return readings
}

/**
 * The exact integral over these readings, minutes at the reference temperature. From the toast start to the first of
 * them the wood is taken to be as hot as then, which counts only in the first firing: later ones begin in the cold.
 */
export function doseOf(readings: LeadReadings, atMs: Iterable<number>, toastMs: number): number {
  const points = [...atMs]
    .filter((at) => at >= toastMs)
    .sort((a, b) => a - b)
    .map((at) => ({ timeS: (at - toastMs) / 1000, tempC: readings.get(at) ?? NaN }))
    .filter(({ tempC }) => !Number.isNaN(tempC))
  const [first] = points
  if (first === undefined || points.length < 2) return 0
  return equivalentMinutes(defaultSiteRules.dose, [{ timeS: 0, tempC: first.tempC }, ...points])
}

export type ViewerFindings = {
  /** Stored, but not in a picture that was drawn later. */
  missing: string[]
  /** In a picture, but not stored. */
  unfounded: string[]
  /** The largest difference of the live dose from the integral over the same readings, as a share. */
  doseDifference: number
  /** Pictures that were compared. */
  looks: number
}

const seenWithinMs = 20_000

/** Compares each picture with the table: with what was there before the picture, and with what is there after it. */
export async function compareViewers(rig: Rig, fire: Fire, findings: ViewerFindings): Promise<void> {
  const before = await storedLead(rig, fire)
  const askedMs = Date.now()
  const old = new Map(fire.viewers.map((viewer) => [viewer, viewer.lastSeen()]))
  for (const viewer of fire.viewers) {
    // Two states later all that was stored before has gone out.
    for (let news = 0, last = old.get(viewer) ?? null; news < 2;) {
      const seen = viewer.lastSeen()
      if (seen !== null && seen !== last) {
        last = seen
        news += 1
      } else if (Date.now() - askedMs > seenWithinMs) {
        findings.missing.push(`a viewer of ${fire.id.slice(0, 8)} is told nothing any more`)
        break
      } else await sleep(50)
    }
  }
  const pictures = fire.viewers.map((viewer) => viewer.lastSeen())
  const after = await storedLead(rig, fire)
  for (const seen of pictures) {
    if (seen === null || seen.firingId !== fire.id) continue
    findings.looks += 1
    const held = new Set(seen.leadAtMs)
    for (const atMs of before.keys())
      if (!held.has(atMs)) findings.missing.push(`${fire.id.slice(0, 8)} at ${new Date(atMs).toISOString()}`)
    for (const atMs of held)
      if (!after.has(atMs))
        findings.unfounded.push(`${fire.id.slice(0, 8)} at ${new Date(atMs).toISOString()}`)
    const exact = doseOf(after, held, fire.toastMs)
    if (exact > 0)
      findings.doseDifference = Math.max(findings.doseDifference, Math.abs(seen.doseMinutes / exact - 1))
  }
}
