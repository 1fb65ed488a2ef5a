import { mkdirSync, mkdtempSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { fileURLToPath } from 'node:url'
import { build } from 'vite'

const root = fileURLToPath(new URL('../../', import.meta.url))
const names = ['server', 'gateway', 'program'] as const

/** The programs that the suite kills, as plain JavaScript. */
export type Programs = Record<(typeof names)[number], string> & { remove: () => void }

/**
 * Builds them once: a program that is started some hundred times should not be read through a compiler each time. What
 * they are made of is the same; packages stay outside.
 */
export async function buildPrograms(): Promise<Programs> {
  // In the clone, where the packages are found.
  const data = join(root, '.data')
  mkdirSync(data, { recursive: true })
  const outDir = mkdtempSync(join(data, 'faults-'))
  await build({
    root,
    configFile: false,
    publicDir: false,
    logLevel: 'error',
    resolve: { alias: { '@': root.replace(/\/$/, '') } },
    build: {
      ssr: true,
      outDir,
      emptyOutDir: false,
      minify: false,
      target: 'node20',
      rolldownOptions: {
        input: Object.fromEntries(names.map((name) => [name, join(root, 'tests/faults', `${name}.ts`)])),
        output: { entryFileNames: '[name].mjs', chunkFileNames: '[name]-[hash].mjs' },
      },
    },
  })
  const pathOf = (name: string) => join(outDir, `${name}.mjs`)
  return {
    server: pathOf('server'),
    gateway: pathOf('gateway'),
    program: pathOf('program'),
    remove: () => rmSync(outDir, { recursive: true, force: true }),
  }
}
