import type { Server } from 'node:http'
import { join } from 'node:path'
import { openObjectFolder } from '@/simulators/files/object-folder'
import { startFilesServer } from '@/simulators/files/server'

const keys = { accessKeyId: 'emberstave', secretAccessKey: 'of this process alone', region: 'us-east-1' }

/**
 * The files simulator in this process, on a free port, keeping in the folder that the started one keeps in
 * (`DATA_DIR/files`); points this process at it. Call it before anything reads the environment.
 */
export async function startOwnFiles(dataDir = process.env['DATA_DIR'] ?? '.data'): Promise<Server> {
  const folder = openObjectFolder(join(dataDir, 'files'))
  const server = await startFilesServer({ port: 0, bucket: 'emberstave', keys, folder })
  const address = server.address()
  if (address === null || typeof address === 'string') throw new Error('the files simulator has no port')
  Object.assign(process.env, {
    S3_ENDPOINT: `http://127.0.0.1:${address.port}`,
    S3_REGION: keys.region,
    S3_BUCKET: 'emberstave',
    S3_ACCESS_KEY_ID: keys.accessKeyId,
    S3_SECRET_ACCESS_KEY: keys.secretAccessKey,
  })
  return server
}
