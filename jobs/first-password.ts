import { existsSync } from 'node:fs'
import { systemClock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'

// `npm run first-password -- E-MAIL`, on the machine itself: the way back in for a sole owner who forgot their password. Kilnward may
// run meanwhile. Whoever may read the records may do this, and nobody else.

async function renew(typed: string | undefined): Promise<void> {
  if (typed === undefined) throw new AppError('invalid_input', 'Say for whom: npm run first-password -- E-MAIL')
  // Before what opens the records, which then asks where they lie.
  if (existsSync('.env')) process.loadEnvFile('.env')
  const { databaseFile } = await import('@/db/connection')
  if (!existsSync(databaseFile())) {
    throw new AppError('not_found', `There are no records in ${databaseFile()}. DATA_DIR says where they lie.`)
  }
  const { Member } = await import('@/models')
  const { renewFirstPassword } = await import('@/lib/commands/renew-first-password')
  const { closeRecords } = await import('@/lib/server/records')
  try {
    const email = typed.trim().toLowerCase()
    const member = await Member.findOne({ where: { email } })
    if (!member) throw new AppError('not_found', `Nobody here has the e-mail ${email}.`)
    const { firstPassword } = await renewFirstPassword(member.id, { member: null, clock: systemClock })
    process.stdout.write(`First password of ${member.name}, shown this one time: ${firstPassword}\n`)
    process.stdout.write('It is good for a day and for making their own. They are signed out everywhere.\n')
  } finally {
    await closeRecords()
  }
}

try {
  await renew(process.argv[2])
} catch (error) {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`)
  process.exitCode = 1
}
