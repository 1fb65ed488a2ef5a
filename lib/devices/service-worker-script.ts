import { readFile } from 'node:fs/promises'
import { join } from 'node:path'
import { shared } from '@/lib/runtime'

/** The service worker's script with this build's name in it, so that a new build is a new version to the browser. */
export async function serviceWorkerScript(): Promise<string> {
  return shared('service worker', readScript)
}

async function readScript(): Promise<string> {
  const [script, version] = await Promise.all([
    readFile(join(process.cwd(), 'lib', 'devices', 'service-worker.js'), 'utf8'),
    buildName(),
  ])
  return script.replace('__VERSION__', version)
}

/** Next's own name of the build; in development there is none. */
async function buildName(): Promise<string> {
  const name = await readFile(join(process.cwd(), '.next', 'BUILD_ID'), 'utf8').catch(() => 'development')
  return name.trim().replaceAll(/[^\w-]/g, '')
}

export function serviceWorkerAnswer(script: string): Response {
  return new Response(script, {
    headers: {
      'content-type': 'text/javascript; charset=utf-8',
      // Asked for each time, so that a new build is noticed.
      'cache-control': 'no-cache',
      'service-worker-allowed': '/',
    },
  })
}
