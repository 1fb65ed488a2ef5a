import { readFileSync, statSync } from 'node:fs'
import * as z from 'zod'

/** What the seed writes for the simulator: who may sign in, and which gateway reads which probe where. */
const demoFileSchema = z.looseObject({
  signIns: z.array(
    z.looseObject({ role: z.string(), name: z.string(), email: z.string(), password: z.string() }),
  ),
  gateways: z.array(
    z.looseObject({
      id: z.string(),
      name: z.string(),
      token: z.string(),
      hearths: z.array(z.int()),
      probes: z.array(
        z.looseObject({
          id: z.guid(),
          hearth: z.int(),
          role: z.enum(['lead', 'opposite', 'coals']),
          thermocoupleType: z.enum(['K', 'N', 'J', 'T']),
        }),
      ),
    }),
  ),
})

export type DemoFile = z.infer<typeof demoFileSchema>
export type DemoGateway = DemoFile['gateways'][number]
export type DemoProbe = DemoGateway['probes'][number]

/** Reads the file, with the instant at which the seed was done. Throws when it is absent or of another shape. */
export function readDemoFile(path: string): { demo: DemoFile; seededAtMs: number } {
  const demo = demoFileSchema.parse(JSON.parse(readFileSync(path, 'utf8')))
  return { demo, seededAtMs: statSync(path).mtimeMs }
}
