import { readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { expect, it } from 'vitest'
import { gatewayConfigSchema } from '@/lib/gateway/config'

const guide = readFileSync(fileURLToPath(new URL('../../docs/wiring-a-module.md', import.meta.url)), 'utf8')

it('the example of the wiring guide is a configuration that the program takes', () => {
  const [, example = ''] = /```json\n([\s\S]*?)```/.exec(guide) ?? []
  const config = gatewayConfigSchema.parse(JSON.parse(example))
  expect(config.modules[0]?.channels.map(({ kind }) => kind)).toEqual(['microvolts', 'temperature'])
})

it('every field that the guide names is a field of the configuration', () => {
  const known = new Set(
    JSON.stringify(gatewayConfigSchema.toJSONSchema({ io: 'input' })).match(/[A-Za-z]\w*/g),
  )
  const named = [...guide.matchAll(/`([a-z]\w*[A-Z]\w*|kind|type|address|status)`/g)].map(
    ([, name = '']) => name,
  )
  expect(named.length).toBeGreaterThan(5)
  for (const name of named) expect(known.has(name), name).toBe(true)
})

it('the guide ends its cautions as every caution here does', () => {
  expect(guide.trimEnd()).toMatch(/Follow local code and the responsible person\.$/)
})
