import { join } from 'node:path'
import { z } from 'zod'

const RESERVED_HOST = /(^|\.)(localhost|local|invalid|test|localdomain)$/i

/** Apple refuses a VAPID subject with a reserved or missing domain, and no library says so; refuse it at the start instead. */
function isRealContact(subject: string): boolean {
  const host = subject.startsWith('mailto:')
    ? subject.split('@')[1]
    : subject.startsWith('https://')
      ? new URL(subject).hostname
      : undefined
  return host !== undefined && host.includes('.') && !RESERVED_HOST.test(host)
}

/** Words of a line that was copied from somewhere and never filled in; and keys hit at random do not repeat so few letters. */
const isExampleSecret = (secret: string) =>
  /change.?(?:me|this)|replace.?(?:me|this)|your.?secret|example|placeholder/i.test(secret) || new Set(secret).size < 10

const schema = z.object({
  NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
  /** Folder of the database and of what a new foundry makes for itself. */
  DATA_DIR: z.string().min(1).default('data'),
  /** Folder of the backups, where it is not inside DATA_DIR. */
  BACKUP_DIR: z.string().optional(),
  NEXTAUTH_SECRET: z
    .string()
    .min(32, 'NEXTAUTH_SECRET must be at least 32 characters.')
    .refine((secret) => secret.length < 32 || !isExampleSecret(secret), 'NEXTAUTH_SECRET is an example: make your own, or leave it out.'),
  NEXTAUTH_URL: z.url('NEXTAUTH_URL must be the address people open, such as http://localhost:3000.'),
  /** Waiting writers and password hashes hold threads; with Node's four the holder of the write lock can wait for one for ever. */
  UV_THREADPOOL_SIZE: z
    .string()
    .default('')
    .refine((size) => Number(size) >= 16, 'UV_THREADPOOL_SIZE must be at least 16; npm start sets it.'),
  VAPID_PUBLIC_KEY: z.string().min(80),
  VAPID_PRIVATE_KEY: z.string().min(40),
  VAPID_SUBJECT: z.string().refine(isRealContact, 'VAPID_SUBJECT must be mailto: or https: with a real domain.'),
  /** Extra hosts that a push subscription may name, host:port, comma separated: for the push service of the tests. */
  PUSH_EXTRA_HOSTS: z.string().default(''),
  /** PEM file of a certificate authority to trust for pushes, beside the system's. */
  PUSH_CA_FILE: z.string().optional(),
  /** Made by npm start where others can reach the server: the first owner types it, so that nobody else comes first. */
  SETUP_CODE: z.string().min(8).optional(),
  /** 'off' stops the demo foundry's own sensors. */
  DEMO_FEED: z.enum(['on', 'off']).default('on'),
})
export type Env = z.infer<typeof schema>

let parsed: Env | undefined

/**
 * The process environment, checked once.
 *
 * @throws {Error} with one line a setting that is missing or wrong; the program must not start then.
 */
export function env(): Env {
  if (parsed) return parsed
  const result = schema.safeParse(process.env)
  if (!result.success) {
    throw new Error(`Settings: ${result.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join(' ')}`)
  }
  return (parsed = result.data)
}

/** Where the records and secrets lie. Asked for apart from the rest: a restore needs no other setting. */
export const dataDir = (): string => process.env['DATA_DIR'] || 'data'

/** Where the backups lie; on another disk if BACKUP_DIR names one. */
export const backupDir = (): string => process.env['BACKUP_DIR'] || join(dataDir(), 'backups')
