import { forgiveWrongPins } from '@/lib/accounts/pin-tries'
import type { SignInBody } from '@/lib/accounts/schema'
import type { Device, StartedSession } from '@/lib/accounts/sessions'
import { startSession } from '@/lib/accounts/sessions'
import { writeAuditEntry } from '@/lib/audit/write-entry'
import type { PersonActor, Role } from '@/lib/auth/actor'
import { verifyPassword } from '@/lib/auth/password'
import { unsealSessionId } from '@/lib/auth/session-cookie'
import { countSignInTry, forgetOldTries, forgiveTry } from '@/lib/auth/throttle'
import { forkEm, inTransaction, queryRows } from '@/lib/db/orm'
import { AppError } from '@/lib/errors'
import { log } from '@/lib/log'
import { now } from '@/lib/runtime'

type SignInRow = {
  id: string
  name: string
  role: Role
  customer_id: string | null
  temperature_unit: 'C' | 'F'
  password_hash: string | null
}

/**
 * Signs a person in. An unknown e-mail, a wrong password, an invited and a closed account take the same path: one
 * count, one query, one argon2 computation, one answer.
 * @throws AppError 'invalid' without naming which of the two is wrong, 'too many' with the seconds to wait.
 */
export async function signIn(
  input: SignInBody,
  device: Device,
  cookieHeader: string | null = null,
): Promise<StartedSession> {
  const tried = await countSignInTry(input.email, device.address)
  const [row] = await queryRows<SignInRow>(
    await forkEm(),
    `select id, name, role, customer_id, temperature_unit,
            case when state = 'active' then password_hash end as password_hash
       from accounts where lower(email) = lower(?)`,
    [input.email],
  )
  const isRight = await verifyPassword(row?.password_hash ?? null, input.password)
  if (!isRight || row === undefined) {
    log().warn({ address: device.address }, 'a sign-in failed')
    throw new AppError(
      'invalid',
      'The e-mail address and the password do not go together. Look at both and try again.',
    )
  }
  await forgiveTry(tried)
  await forgiveWrongPins(row.id)
  void forgetOldTries().catch((error: unknown) => log().warn({ err: error }, 'old tries were not cleared'))
  return openSession(row, device, await unsealSessionId(cookieHeader))
}

async function openSession(row: SignInRow, device: Device, formerId: string | null): Promise<StartedSession> {
  return inTransaction(async (em) => {
    if (formerId !== null) {
      await queryRows(em, 'update sessions set ended_at = ? where id = ? and ended_at is null', [
        now(),
        formerId,
      ])
    }
    const started = await startSession(em, row.id, device)
    const actor: PersonActor = {
      kind: 'person',
      accountId: row.id,
      sessionId: started.sessionId,
      name: row.name,
      role: row.role,
      customerId: row.customer_id,
      temperatureUnit: row.temperature_unit,
    }
    await writeAuditEntry(
      em,
      actor,
      'session.started',
      { type: 'account', id: row.id },
      {
        address: device.address,
      },
    )
    return started
  })
}
