import { execFile } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { promisify } from 'node:util'
import { Client, escapeIdentifier } from 'pg'
import type { CleanTask } from '@/tests/faults/clean-run'
import type { StoredReading } from '@/tests/faults/ledger'
import type { Rig } from '@/tests/faults/rig'
import { retried } from '@/tests/faults/store'
import type { TestDatabase } from '@/tests/support/database'
import { appUrlOf, onTestCluster, ownerUrlOf } from '@/tests/support/test-cluster'

const root = fileURLToPath(new URL('../../', import.meta.url))
const runFile = promisify(execFile)

/** What the evidence of a firing came to. */
type Evidence = {
  /** The newest seal's checksums by probe, as one text. */
  seals: string
  readings: number
  doseMinutes: number | null
  points: number | null
  verdict: string | null
  /** The whole score, in PostgreSQL's order of keys. */
  score: string | null
}

export type CleanFindings = {
  failures: string[]
  firings: number
  complete: number
  sealedReadings: number
  doseDifference: number
}

export async function readEvidence(databaseUrl: string): Promise<Map<string, Evidence>> {
  const client = new Client({ connectionString: databaseUrl })
  await client.connect()
  try {
    const { rows } = await client.query<{
      id: string
      seals: string | null
      readings: number
      dose_minutes: number | null
      points: number | null
      verdict: string | null
      score: string | null
    }>(
      `select f.id, s.seals, coalesce(s.readings, 0)::int as readings, c.dose_minutes, c.points, c.verdict, c.score
         from firings f
         left join lateral (
           select string_agg(probe_id || ' ' || sha256, ', ' order by probe_id) as seals, sum(reading_count) as readings
             from seals where firing_id = f.id
              and revision = (select max(revision) from seals where firing_id = f.id)) s on true
         left join lateral (
           select dose_minutes, points, verdict, result::text as score
             from scores where firing_id = f.id order by number desc limit 1) c on true
        where f.state = 'finished'`,
    )
    return new Map(
      rows.map((row) => [
        row.id,
        {
          seals: row.seals ?? '',
          readings: row.readings,
          doseMinutes: row.dose_minutes,
          points: row.points,
          verdict: row.verdict,
          score: row.score,
        },
      ]),
    )
  } finally {
    await client.end()
  }
}

/**
 * Sends the readings that are stored once more, without a fault, into a copy of the database from which every reading,
 * seal and score was taken; then compares seals, doses and scores. The suite's server and pools must be closed.
 */
export async function compareWithCleanRun(
  rig: Pick<Rig, 'database'>,
  boots: readonly { gatewayId: string; bootId: string; readings: readonly StoredReading[] }[],
): Promise<CleanFindings> {
  const evidence = await readEvidence(rig.database.ownerUrl)
  const clean = await cloneWithoutReadings(rig.database)
  try {
    await runClean(clean.databaseUrl, {
      boots: boots.map(({ gatewayId, bootId, readings }) => ({
        gatewayId,
        bootId,
        readings: readings.map(({ emfTenthUv, coldCentiC, ...rest }) => ({
          ...rest,
          emfTenthUv: emfTenthUv ?? 0,
          coldCentiC: coldCentiC ?? 0,
        })),
      })),
      firingIds: [...evidence.keys()],
    })
    return compareEvidence(evidence, await readEvidence(clean.ownerUrl))
  } finally {
    await clean.drop()
  }
}

async function cloneWithoutReadings(database: TestDatabase) {
  const source = new URL(database.ownerUrl).pathname.slice(1)
  const name = `${source}_clean`
  const quoted = escapeIdentifier(name)
  // The connections of a server that was killed take a moment to go.
  await retried(() =>
    onTestCluster(async (client) => {
      await client.query(`CREATE DATABASE ${quoted} TEMPLATE ${escapeIdentifier(source)}`)
    }),
  )
  const client = new Client({ connectionString: ownerUrlOf(name) })
  await client.connect()
  await client.query(
    'truncate readings, seals, scores, refused_readings, gateway_losses, gateway_boots cascade',
  )
  await client.end()
  return {
    databaseUrl: appUrlOf(name),
    ownerUrl: ownerUrlOf(name),
    drop: () =>
      onTestCluster(async (admin) => {
        await admin.query(`DROP DATABASE IF EXISTS ${quoted} WITH (FORCE)`)
      }),
  }
}

async function runClean(databaseUrl: string, task: CleanTask): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), 'emberstave-clean-'))
  const taskPath = join(folder, 'task.json')
  writeFileSync(taskPath, JSON.stringify(task))
  try {
    const args = ['--import', 'tsx', 'tests/faults/clean-run.ts', taskPath, join(folder, 'done')]
    const env = { ...process.env, DATABASE_URL: databaseUrl }
    await runFile(process.execPath, args, { cwd: root, env, timeout: 300_000 })
  } finally {
    rmSync(folder, { recursive: true, force: true })
  }
}

function compareEvidence(
  faulted: ReadonlyMap<string, Evidence>,
  clean: ReadonlyMap<string, Evidence>,
): CleanFindings {
  const findings: CleanFindings = {
    failures: [],
    firings: 0,
    complete: 0,
    sealedReadings: 0,
    doseDifference: 0,
  }
  for (const [firingId, one] of faulted) {
    const other = clean.get(firingId)
    const name = `firing ${firingId.slice(0, 8)}`
    findings.firings += 1
    findings.sealedReadings += one.readings
    if (one.verdict !== null && one.verdict !== 'incomplete') findings.complete += 1
    if (one.seals === '' || one.score === null) findings.failures.push(`${name} was not sealed and scored`)
    if (one.seals !== other?.seals)
      findings.failures.push(`${name}: its seals differ from those of the clean run`)
    if (one.score !== other?.score)
      findings.failures.push(`${name}: its score differs from that of the clean run`)
    const [dose, cleanDose] = [one.doseMinutes, other?.doseMinutes ?? null]
    if (dose === null || cleanDose === null) {
      if (dose !== cleanDose) findings.failures.push(`${name}: only one of the runs has a dose`)
    } else {
      const difference = Math.abs(dose / cleanDose - 1)
      findings.doseDifference = Math.max(findings.doseDifference, difference)
    }
  }
  return findings
}
