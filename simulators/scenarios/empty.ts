import { writeFile } from 'node:fs/promises'
import { join } from 'node:path'
import { systemActor } from '@/lib/auth/actor'
import { env } from '@/lib/env'
import { createSite } from '@/lib/site/create-site'
import { demoPassword, demoPeople, seedPerson } from '@/simulators/scenarios/seed-people'

/** A site with an administrator and a master cooper, and nothing else: to begin from the first hearth. */
export async function seedEmpty(say: (line: string) => void): Promise<void> {
  await createSite(systemActor('set-up'), {
    name: 'An empty cooperage (demo)',
    serialPrefix: 'EMP',
    timeZone: 'Europe/London',
    isDemo: true,
  })
  const people = [demoPeople.administrator, demoPeople.masterCooper]
  for (const person of people) await seedPerson(person, [])
  const signIns = people.map(({ role, name, email }) => ({ role, name, email, password: demoPassword }))
  const file = process.env['DEMO_FILE'] ?? join(env().DATA_DIR, 'demo.json')
  await writeFile(file, `${JSON.stringify({ signIns, gateways: [] }, null, 2)}\n`, { mode: 0o600 })
  say('an administrator and a master cooper can sign in')
}
