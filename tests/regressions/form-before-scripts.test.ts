import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { expect, it } from 'vitest'

const filesOf = (folder: string) =>
  readdirSync(folder, { recursive: true, encoding: 'utf8' })
    .filter((file) => file.endsWith('.tsx'))
    .map((file) => join(folder, file))

/**
 * A form that is sent before the page's scripts run falls back to its own method. With GET, a password stood in the
 * address bar.
 */
it('a form that scripts send never puts what was typed into the address', () => {
  const sent = ['app', 'components']
    .flatMap(filesOf)
    .flatMap((file) =>
      [...readFileSync(file, 'utf8').matchAll(/<form\b[^>]*?\bonSubmit=/g)].map(([tag]) => ({ file, tag })),
    )
  expect(sent.length).toBeGreaterThan(10)
  expect(sent.filter(({ tag }) => !tag.includes('method="post"'))).toEqual([])
})
