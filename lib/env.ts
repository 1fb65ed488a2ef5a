import * as z from 'zod'
import { shared } from '@/lib/runtime'

const envSchema = z.object({
  DATABASE_URL: z.string().min(1),
  SESSION_SECRET: z.string().min(32),
  APP_ORIGIN: z.url(),
  /** Addresses of reverse proxies on other machines, with commas between; one on this machine is trusted anyway. */
  TRUSTED_PROXIES: z.string().default(''),
  PORT: z.coerce.number().int().min(1).max(65535).default(3000),
  EMBERSTAVE_MODE: z.enum(['demo', 'dev', 'serve', 'test']).default('serve'),
  SMTP_URL: z.string().optional(),
  MAIL_FROM: z.string().default('Emberstave <emberstave@localhost>'),
  MAIL_PAGE_URL: z.string().optional(),
  /** Object storage for photos, as S3 speaks; left out, photos are refused in words. */
  S3_ENDPOINT: z.string().optional(),
  S3_REGION: z.string().default('us-east-1'),
  S3_BUCKET: z.string().optional(),
  S3_ACCESS_KEY_ID: z.string().optional(),
  S3_SECRET_ACCESS_KEY: z.string().optional(),
  DATA_DIR: z.string().default('.data'),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
})

export type Env = z.infer<typeof envSchema>

/** The environment, checked once. @throws Error naming each variable that lacks or does not fit. */
export function env(): Env {
  return shared('env', () => {
    const parsed = envSchema.safeParse(process.env)
    if (parsed.success) return parsed.data
    const lines = parsed.error.issues.map((issue) => `  ${issue.path.join('.')}: ${issue.message}`)
    throw new Error(`The environment is not complete:\n${lines.join('\n')}`)
  })
}
