import { createHash, randomBytes, randomUUID } from 'node:crypto'
import { forkEm, queryRows } from '@/lib/db/orm'
import type { GatewayIdentity } from '@/lib/ingest/verify-device-token'
import type { RecipeContent } from '@/lib/recipes/schema'
import { recipeContentSchema } from '@/lib/recipes/schema'
import { sha256OfJson } from '@/lib/recipes/content-sha256'
import { now } from '@/lib/runtime'

export type TestGateway = GatewayIdentity & { token: string; tokenId: string }
export type TestProbe = { id: string; no: number }

async function insertOne<Row>(sql: string, parameters: unknown[]): Promise<Row> {
  const [row] = await queryRows<Row>(await forkEm(), sql, parameters)
  if (row === undefined) throw new Error('an insert gave no row')
  return row
}

/** A gateway with one device token, made without the verbs. */
export async function createTestGateway(options: { mayReplay?: boolean } = {}): Promise<TestGateway> {
  const mayReplay = options.mayReplay ?? false
  const name = `Gateway ${randomUUID().slice(0, 8)}`
  const { id } = await insertOne<{ id: string }>(
    'insert into gateways (name, may_replay, created_at) values (?, ?, ?) returning id',
    [name, mayReplay, now()],
  )
  const token = `emb_${randomBytes(24).toString('base64url')}`
  const made = await insertOne<{ id: string }>(
    'insert into gateway_tokens (gateway_id, token_sha256, created_at) values (?, ?, ?) returning id',
    [id, createHash('sha256').update(token).digest('hex'), now()],
  )
  return { gatewayId: id, name, mayReplay, token, tokenId: made.id }
}

export async function createTestProbe(
  gatewayId: string,
  channel: number,
  options: { isRetired?: boolean; type?: 'K' | 'N' | 'J' | 'T' } = {},
): Promise<TestProbe> {
  return insertOne<TestProbe>(
    `insert into probes (gateway_id, channel, name, thermocouple_type, iec_class, usual_role, height, side, depth_mm,
       mounting, retired_at, created_at)
     values (?, ?, ?, ?, 1, 'lead', 'bilge', 'A', 2, 'wedge', ?, ?) returning id, no`,
    [
      gatewayId,
      channel,
      `Bilge ${String.fromCharCode(64 + channel)}`,
      options.type ?? 'K',
      options.isRetired === true ? now() : null,
      now(),
    ],
  )
}

/** Two stages over 20 min, 2 mm at the bilge. */
export const testRecipe: RecipeContent = recipeContentSchema.parse({
  pieceKind: 'barrel',
  sizeAndShape: '225 L',
  thicknessMm: 27,
  leadPlace: { height: 'bilge', side: 'A', depthMm: 2, mounting: 'wedge' },
  preheat: { moistureMinPercent: 14, moistureMaxPercent: 22, waterTempC: 80, method: 'spray', minutes: 5 },
  bend: { minimumMinutes: 10, woodLimitC: 160 },
  planStartTempC: 60,
  stages: [
    {
      name: 'Climb',
      kind: 'ramp',
      targetTempC: 180,
      minutes: 12,
      bandC: 8,
      lid: 'off',
      cues: [{ action: 'feed', minute: 6 }],
    },
    { name: 'Hold', kind: 'hold', targetTempC: 180, minutes: 8, bandC: 6, lid: 'on' },
  ],
  limits: { woodMaximumC: 215, climbMaximumCPerMin: 14, spreadC: 15 },
  restMinutes: 10,
})

export type TestFiring = { id: string; hearthId: string; pieceId: string; content: RecipeContent }

export type TestFiringOptions = {
  accountId: string
  customerId: string
  state: 'preheating' | 'bending' | 'toasting' | 'resting'
  preheatAt: Date
  toastAt?: Date
  probes: { lead: string; opposite?: string; coals?: string }
  content?: RecipeContent
}

/** A live firing with its probes, made without the verbs; site settings version 1 must be there. */
export async function createTestFiring(options: TestFiringOptions): Promise<TestFiring> {
  const content = options.content ?? testRecipe
  const { accountId, preheatAt } = options
  const recipe = await insertOne<{ id: string }>(
    'insert into recipes (name, created_at, created_by) values (?, ?, ?) returning id',
    [`Recipe ${randomUUID().slice(0, 8)}`, preheatAt, accountId],
  )
  const version = await insertOne<{ id: string }>(
    `insert into recipe_versions (recipe_id, number, author_id, piece_kind, size_and_shape, thickness_mm, lead_height,
       lead_side, lead_depth_mm, lead_mounting, moisture_min_percent, moisture_max_percent, preheat_water_temp_c,
       preheat_method, preheat_minutes, bend_minimum_minutes, bend_wood_limit_c, plan_start_temp_c,
       dose_tolerance_log10, wood_maximum_c, climb_maximum_c_per_min, spread_limit_c, rest_minutes, created_at, updated_at)
     values (?, 1, ?, 'barrel', '225 L', 27, 'bilge', 'A', 2, 'wedge', 14, 22, 80, 'spray', 5, 10, 160, 60, 0.12, 215,
       14, 15, 10, ?, ?) returning id`,
    [recipe.id, accountId, preheatAt, preheatAt],
  )
  const batch = await insertOne<{ id: string }>(
    `insert into batches (customer_id, recipe_version_id, piece_kind, size_and_shape, piece_count, wood_lot, created_at,
       created_by) values (?, ?, 'barrel', '225 L', 1, 'L1', ?, ?) returning id`,
    [options.customerId, version.id, preheatAt, accountId],
  )
  const piece = await insertOne<{ id: string }>(
    `insert into pieces (kind, serial, batch_id, position, queue_position, created_at)
     select 'barrel', 'TST-' || lpad(nextval('piece_serial_seq')::text, 4, '0') || '-A', ?, 1, 1, ? returning id`,
    [batch.id, preheatAt],
  )
  const hearth = await insertOne<{ id: string }>(
    'insert into hearths (number, created_at) select coalesce(max(number), 0) + 1, ?::timestamptz from hearths returning id',
    [preheatAt],
  )
  const copy = {
    recipeId: recipe.id,
    recipeName: 'Test medium',
    versionId: version.id,
    versionNumber: 1,
    content,
  }
  const firing = await insertOne<{ id: string }>(
    `insert into firings (piece_id, recipe_version_id, recipe_copy, recipe_sha256, state, toaster_id,
       site_settings_version, queued_at, preheat_at, bend_at, toast_at, rest_at, moisture_percent, moisture_method)
     values (?, ?, ?::jsonb, ?, ?, ?, 1, ?, ?, ?, ?, ?, 18, 'meter') returning id`,
    [
      piece.id,
      version.id,
      JSON.stringify(copy),
      sha256OfJson(copy),
      options.state,
      accountId,
      preheatAt,
      preheatAt,
      options.state === 'preheating' ? null : preheatAt,
      options.toastAt ?? null,
      options.state === 'resting' ? (options.toastAt ?? null) : null,
    ],
  )
  await queryRows(
    await forkEm(),
    'insert into firing_placements (firing_id, hearth_id, from_at) values (?, ?, ?)',
    [firing.id, hearth.id, preheatAt],
  )
  for (const [role, probeId] of Object.entries(options.probes)) {
    await queryRows(
      await forkEm(),
      `insert into firing_probes (firing_id, probe_id, role, height, side, depth_mm, mounting, from_at)
       values (?, ?, ?, 'bilge', 'A', 2, 'wedge', ?)`,
      [firing.id, probeId, role, preheatAt],
    )
  }
  return { id: firing.id, hearthId: hearth.id, pieceId: piece.id, content }
}

/** Ends a test firing and closes its periods, as the verb does. */
export async function endTestFiring(firingId: string, endedAt: Date): Promise<void> {
  const em = await forkEm()
  await queryRows(
    em,
    `update firings set state = 'finished', ended_at = ?, rest_at = coalesce(rest_at, ?), revision = revision + 1
      where id = ?`,
    [endedAt, endedAt, firingId],
  )
  for (const table of ['firing_placements', 'firing_probes']) {
    await queryRows(em, `update ${table} set until_at = ? where firing_id = ? and until_at is null`, [
      endedAt,
      firingId,
    ])
  }
}
