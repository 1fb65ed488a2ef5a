import type { Loss } from '@/lib/gateway/protocol'
import type { LogLine, MadeReading } from '@/tests/faults/gateway-log'

/** What one boot's readings came to, by the gateway's own log. */
export type BootAccount = {
  bootId: string
  gatewayId: string
  made: Map<number, MadeReading>
  /** Everything up to it was acknowledged. */
  ackedSeq: number
  /** Times at which the server acknowledged less than it had before: it had said so before it was safe. */
  taken: string[]
  /** Everything up to it was looked for in the database. */
  checkedSeq: number
  /** The highest number that was kept on disk. */
  keptSeq: number
  refused: Map<number, string>
  losses: Loss[]
  /** By how much what was sent differs from what was written down: the box's clock was set meanwhile. */
  shiftsMs: Set<number>
}

/** A reading as the table or a seal has it. */
export type StoredReading = {
  seq: number
  probeId: string
  atMs: number
  emfTenthUv: number | null
  coldCentiC: number | null
}

export type Ledger = {
  take: (gatewayId: string, lines: readonly LogLine[]) => void
  boots: () => readonly BootAccount[]
  /** The truth's instant of the newest reading of a gateway that was acknowledged. */
  newestAckedMs: (gatewayId: string) => number
  ackedCount: () => number
}

export function createLedger(): Ledger {
  const boots = new Map<string, BootAccount>()
  const accountOf = (gatewayId: string, bootId: string) => {
    const known = boots.get(bootId)
    if (known !== undefined) return known
    const made: BootAccount = {
      bootId,
      gatewayId,
      made: new Map(),
      ackedSeq: 0,
      taken: [],
      checkedSeq: 0,
      keptSeq: 0,
      refused: new Map(),
      losses: [],
      shiftsMs: new Set([0]),
    }
    boots.set(bootId, made)
    return made
  }
  const takeLine = (account: BootAccount, line: LogLine) => {
    if (line.kind === 'made') account.made.set(line.reading.seq, line.reading)
    else if (line.kind === 'kept') account.keptSeq = Math.max(account.keptSeq, line.to)
    else if (line.kind === 'sent') account.shiftsMs.add(line.shiftMs)
    else if (line.kind === 'lost') addLoss(account, line.loss)
    else if (line.kind === 'refused') account.refused.set(line.seq, line.reason)
    else {
      if (line.seq < account.ackedSeq)
        account.taken.push(`${account.ackedSeq} acknowledged, then ${line.seq}`)
      account.ackedSeq = Math.max(account.ackedSeq, line.seq)
    }
  }
  return {
    take: (gatewayId, lines) => {
      for (const line of lines) takeLine(accountOf(gatewayId, line.bootId), line)
    },
    boots: () => [...boots.values()],
    newestAckedMs: (gatewayId) => {
      let newestMs = 0
      for (const boot of boots.values()) {
        if (boot.gatewayId === gatewayId)
          newestMs = Math.max(newestMs, boot.made.get(boot.ackedSeq)?.trueMs ?? 0)
      }
      return newestMs
    },
    ackedCount: () => [...boots.values()].reduce((sum, boot) => sum + boot.ackedSeq, 0),
  }
}

/** A loss is declared with each message until it is acknowledged, and may grow meanwhile. */
function addLoss(account: BootAccount, loss: Loss): void {
  const isKnown = account.losses.some((one) => one.from <= loss.from && one.to >= loss.to)
  if (!isKnown) account.losses.push(loss)
}

export function isDeclaredLost(boot: BootAccount, seq: number): boolean {
  return boot.losses.some((loss) => seq >= loss.from && seq <= loss.to)
}

/** What a comparison found. All but `declaredLost`, `refused` and `worstDatingMs` have to be none. */
export type Findings = {
  /** Acknowledged, and neither stored, refused nor declared lost. */
  lost: string[]
  /** Stored more than once. */
  doubled: string[]
  /** Stored otherwise than it was made: another probe, value or instant. */
  changed: string[]
  /** Acknowledged, but never made. */
  invented: string[]
  declaredLost: number
  refused: number
  /** The largest difference of a stored instant from the truth. */
  worstDatingMs: number
}

export function noFindings(): Findings {
  return {
    lost: [],
    doubled: [],
    changed: [],
    invented: [],
    declaredLost: 0,
    refused: 0,
    worstDatingMs: 0,
  }
}

/**
 * Readings are dated by one offset a boot, which is right to a second and the quickest way so far; a machine that is
 * busy needs its while even for that. What is further off than this was dated wrongly.
 */
const datingAllowanceMs = 2_500

/** Compares what was acknowledged from `fromSeq` to `toSeq` with what is stored of that boot. */
export function compareBoot(
  boot: BootAccount,
  stored: readonly StoredReading[],
  { fromSeq, toSeq }: { fromSeq: number; toSeq: number },
  findings: Findings,
): void {
  const bySeq = new Map<number, StoredReading>()
  for (const reading of stored) {
    if (bySeq.has(reading.seq)) findings.doubled.push(nameOf(boot, reading.seq))
    bySeq.set(reading.seq, reading)
  }
  // A spool that still holds them sends them again; they were lost all the same.
  for (const one of boot.taken.splice(0)) findings.lost.push(`boot ${boot.bootId.slice(0, 8)}: ${one}`)
  for (let seq = fromSeq; seq <= toSeq; seq += 1) {
    const made = boot.made.get(seq)
    const one = bySeq.get(seq)
    if (one === undefined) {
      if (boot.refused.has(seq)) findings.refused += 1
      else if (isDeclaredLost(boot, seq)) findings.declaredLost += 1
      else findings.lost.push(nameOf(boot, seq))
    } else if (made === undefined) findings.invented.push(nameOf(boot, seq))
    else compareReading(boot, made, one, findings)
  }
}

function compareReading(
  boot: BootAccount,
  made: MadeReading,
  stored: StoredReading,
  findings: Findings,
): void {
  const isSame =
    made.probeId === stored.probeId &&
    made.emfTenthUv === stored.emfTenthUv &&
    made.coldCentiC === stored.coldCentiC
  const datingMs = stored.atMs - made.trueMs
  findings.worstDatingMs = Math.max(findings.worstDatingMs, Math.abs(datingMs))
  if (!isSame) findings.changed.push(`${nameOf(boot, made.seq)}: another probe or value`)
  else if (Math.abs(datingMs) > datingAllowanceMs)
    findings.changed.push(`${nameOf(boot, made.seq)}: dated ${datingMs} ms off`)
}

function nameOf(boot: BootAccount, seq: number): string {
  return `boot ${boot.bootId.slice(0, 8)} reading ${seq}`
}
