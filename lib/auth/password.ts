import { hash, verify } from '@node-rs/argon2'
import { shared } from '@/lib/runtime'

/** argon2id with OWASP's second recommended setting (19 MiB, 2 passes, 1 lane). 2 is Algorithm.Argon2id. */
const options = { algorithm: 2, memoryCost: 19_456, timeCost: 2, parallelism: 1 }

export async function hashPassword(password: string): Promise<string> {
  return hash(password.normalize('NFKC'), options)
}

/** Compares in the same time whether or not there is a hash, so that timing tells nothing of who has an account. */
export async function verifyPassword(storedHash: string | null, password: string): Promise<boolean> {
  const stand = shared('password.stand-in', () => hashPassword('nobody has this password'))
  const fits = await verify(storedHash ?? (await stand), password.normalize('NFKC'))
  return fits && storedHash !== null
}
