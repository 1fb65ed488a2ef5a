import { join } from 'node:path'
import * as z from 'zod'
import { openObjectFolder } from './object-folder'
import { startFilesServer } from './server'

/* The local fake of object storage: keeps what Emberstave puts there in a folder, and lets nobody in unsigned. */

const environmentSchema = z.object({
  FILES_PORT: z.coerce.number().int().min(0).max(65_535),
  DATA_DIR: z.string().min(1),
  S3_BUCKET: z.string().min(1),
  S3_REGION: z.string().min(1),
  S3_ACCESS_KEY_ID: z.string().min(1),
  S3_SECRET_ACCESS_KEY: z.string().min(1),
})

async function main() {
  const environment = environmentSchema.parse(process.env)
  const server = await startFilesServer({
    port: environment.FILES_PORT,
    bucket: environment.S3_BUCKET,
    keys: {
      accessKeyId: environment.S3_ACCESS_KEY_ID,
      secretAccessKey: environment.S3_SECRET_ACCESS_KEY,
      region: environment.S3_REGION,
    },
    folder: openObjectFolder(join(environment.DATA_DIR, 'files')),
  })
  console.log(`files simulator: keeps photos in ${join(environment.DATA_DIR, 'files')}`)
  for (const signal of ['SIGTERM', 'SIGINT'] as const) {
    process.once(signal, () => {
      server.close(() => process.exit(0))
      server.closeAllConnections()
    })
  }
}

main().catch((error: unknown) => {
  const sentence = error instanceof z.ZodError ? z.prettifyError(error) : String(error)
  console.error(`files simulator: ${sentence}`)
  process.exit(1)
})
