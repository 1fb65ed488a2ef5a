import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import semver from 'semver'
import { describe, expect, it } from 'vitest'
import * as z from 'zod'
import { isWithin } from '@/lib/setup/packages.mjs'

const read = (name: string): unknown =>
  JSON.parse(readFileSync(fileURLToPath(new URL(`../${name}`, import.meta.url)), 'utf8'))

const lockedSchema = z.object({
  version: z.string().optional(),
  resolved: z.string().optional(),
  integrity: z.string().optional(),
  optional: z.boolean().optional(),
  inBundle: z.boolean().optional(),
  engines: z.union([z.record(z.string(), z.string()), z.array(z.string())]).optional(),
})
const { packages } = z
  .object({ lockfileVersion: z.literal(3), packages: z.record(z.string(), lockedSchema) })
  .parse(read('package-lock.json'))
const manifest = z
  .object({
    engines: z.object({ node: z.string() }),
    dependencies: z.record(z.string(), z.string()),
    devDependencies: z.record(z.string(), z.string()),
  })
  .parse(read('package.json'))

const locked = Object.entries(packages).filter(([path]) => path !== '')
const versionsOf = (name: string) =>
  locked.filter(([path]) => path.endsWith(`node_modules/${name}`)).map(([, one]) => one.version ?? '')

// The lowest version without a published weakness that would matter here. next from the project's own stack paper;
// the others from memory of their advisories, whose numbers are named.
const floors: [name: string, floor: string, because: string][] = [
  ['next', '16.2.6', 'the stack paper'],
  ['react', '19.2.3', 'CVE-2025-55182 and what followed it'],
  ['react-dom', '19.2.3', 'CVE-2025-55182 and what followed it'],
  ['nodemailer', '7.0.7', 'CVE-2025-13033'],
  ['socket.io', '4.6.2', 'CVE-2024-38355'],
  ['socket.io-parser', '4.2.3', 'CVE-2023-32695'],
  ['engine.io', '6.4.2', 'CVE-2023-31125'],
  ['ws', '8.17.1', 'CVE-2024-37890'],
  ['cookie', '0.7.0', 'CVE-2024-47764'],
  ['postcss', '8.4.31', 'CVE-2023-44270'],
  ['nanoid', '3.3.8', 'CVE-2024-55565'],
  ['sharp', '0.32.6', 'CVE-2023-4863'],
  ['esbuild', '0.25.0', 'GHSA-67mh-4wv8-2f99'],
  ['vite', '7.1.11', 'CVE-2025-62522'],
  ['vitest', '3.0.5', 'CVE-2025-24964'],
  ['happy-dom', '20.0.2', 'CVE-2025-61927, CVE-2025-62410'],
  ['braces', '3.0.3', 'CVE-2024-4068'],
  ['cross-spawn', '7.0.5', 'CVE-2024-21538'],
]

describe('the lockfile', () => {
  it('names no download address: packages come from whichever registry npm is set to', () => {
    const text = readFileSync(fileURLToPath(new URL('../package-lock.json', import.meta.url)), 'utf8')
    expect(locked.filter(([, one]) => one.resolved !== undefined).map(([path]) => path)).toEqual([])
    expect(text).not.toMatch(/"https?:\/\/[^"]*\.tgz"/)
  })

  it('has a checksum for each package that is fetched', () => {
    expect(locked.filter(([, one]) => !one.integrity && !one.inBundle).map(([path]) => path)).toEqual([])
  })

  it.each(floors)('%s is at least %s (%s)', (name, floor) => {
    const versions = versionsOf(name)
    expect(versions.length).toBeGreaterThan(0)
    for (const version of versions) expect(semver.gte(version, floor), `${name} ${version}`).toBe(true)
  })

  it('MikroORM is 6.6.16 everywhere: 6.6.17 is broken, 7 needs a newer Node', () => {
    const parts = locked.filter(([path]) => /node_modules\/@mikro-orm\/[^/]+$/.test(path))
    expect(parts.length).toBeGreaterThanOrEqual(4)
    for (const [path, one] of parts) expect(`${path} ${one.version}`).toBe(`${path} 6.6.16`)
  })
})

describe('package.json', () => {
  it('pins every package to one version, the one that is locked', () => {
    for (const [name, wanted] of Object.entries({ ...manifest.dependencies, ...manifest.devDependencies })) {
      expect(`${name} ${packages[`node_modules/${name}`]?.version}`).toBe(`${name} ${wanted}`)
      expect(semver.valid(wanted), `${name} is pinned`).toBe(wanted)
    }
  })

  it('claims no Node on which a package of ours does not run', () => {
    const majors = [20, 21, 22, 23, 24, 25, 26]
    const candidates = majors.flatMap((major) => [0, 12, 13, 19, 99].map((minor) => `${major}.${minor}.0`))
    const claimed = candidates.filter((version) => semver.satisfies(version, manifest.engines.node))
    expect(claimed).toContain('20.19.0')
    for (const [path, one] of locked) {
      const range = Array.isArray(one.engines) ? undefined : one.engines?.['node']
      if (range === undefined || one.optional) continue
      const failing = claimed.filter((version) => !semver.satisfies(version, range))
      expect(failing, `${path} wants Node ${range}`).toEqual([])
    }
  })

  it('is understood by set-up, which has no package to ask', () => {
    for (const version of [
      '18.20.0',
      '20.18.3',
      '20.19.0',
      '20.20.2',
      '21.7.0',
      '22.12.9',
      '22.13.0',
      '23.9.0',
      '24.0.0',
      '26.1.0',
    ]) {
      const range = manifest.engines.node
      expect(`${version} ${isWithin(version, range)}`).toBe(`${version} ${semver.satisfies(version, range)}`)
    }
  })
})
