/** What the hub knows of one gateway, at a moment. */
export type GatewayNow = {
  id: string
  name: string
  /** Since its last message, s, while this server could hear: not before its start, nor while it stood still. */
  silentS: number
  /** Server's clock minus gateway's, s: as it is applied to its readings. */
  clockOffsetS: number
}

type Known = {
  name: string
  /** By this process; null while it has not heard it yet. */
  heardAtMs: number | null
  /** By another process, as the table has it. */
  seenAtMs: number
  clockOffsetMs: number
}

/** When each gateway was heard last, whatever it said. */
export type GatewayWatch = {
  /** As the table has it: another process may have heard it. */
  know: (id: string, name: string, seenAtMs: number | null, clockOffsetMs: number | null) => void
  /** A message of it came; its offset is null until the message is stored. */
  hear: (id: string, atMs: number, clockOffsetMs: number | null) => void
  /** This server did nothing until then, so nobody's silence counts. */
  wasAwayUntil: (atMs: number) => void
  at: (id: string, atMs: number) => GatewayNow | null
}

/** Gateways that lost a server look for it again at intervals of up to 10 s. */
const comeBackMs = 15_000

export function createGatewayWatch(startedAtMs: number): GatewayWatch {
  const known = new Map<string, Known>()
  let awayUntilMs = startedAtMs
  return {
    know: (id, name, seenAtMs, clockOffsetMs) => {
      const before = known.get(id)
      known.set(id, {
        name,
        heardAtMs: before?.heardAtMs ?? null,
        seenAtMs: seenAtMs ?? before?.seenAtMs ?? 0,
        clockOffsetMs: before?.clockOffsetMs ?? clockOffsetMs ?? 0,
      })
    },
    hear: (id, atMs, clockOffsetMs) => {
      const before = known.get(id)
      known.set(id, {
        name: before?.name ?? 'the gateway',
        heardAtMs: Math.max(atMs, before?.heardAtMs ?? 0),
        seenAtMs: before?.seenAtMs ?? 0,
        clockOffsetMs: clockOffsetMs ?? before?.clockOffsetMs ?? 0,
      })
    },
    wasAwayUntil: (atMs) => {
      awayUntilMs = Math.max(awayUntilMs, atMs)
    },
    at: (id, atMs) => {
      const one = known.get(id)
      if (one === undefined) return null
      const fromMs = Math.max(one.heardAtMs ?? startedAtMs + comeBackMs, one.seenAtMs, awayUntilMs)
      return {
        id,
        name: one.name,
        silentS: Math.max(0, atMs - fromMs) / 1000,
        clockOffsetS: one.clockOffsetMs / 1000,
      }
    },
  }
}
