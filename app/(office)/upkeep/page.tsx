import type { Metadata } from 'next'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { KeepFresh } from '@/app/(office)/_components/keep-fresh'
import { BackUpNow } from '@/app/(office)/upkeep/_components/back-up-now'
import { BackupTable } from '@/app/(office)/upkeep/_components/backup-table'
import { CheckList } from '@/app/(office)/upkeep/_components/check-list'
import { DemoPlate } from '@/app/(office)/upkeep/_components/demo-plate'
import { BACKUPS_KEPT } from '@/lib/backups/backup-plan'
import { systemClock } from '@/lib/core/clock'
import { formatMoment } from '@/lib/format/local-time'
import { loadBackupList, loadLastRestore } from '@/lib/queries/backup-list'
import { loadDemoStanding } from '@/lib/queries/demo-standing'
import { loadUpkeep } from '@/lib/queries/upkeep'
import { requireMemberPage } from '@/lib/server/auth'
import { upkeepChecks, upkeepHeadline } from '@/lib/upkeep/checks'
import './upkeep.css'

export const metadata: Metadata = { title: 'Upkeep' }

export default async function UpkeepPage() {
  const member = await requireMemberPage('upkeep', '/upkeep')
  const [facts, backups, restore, demo] = await Promise.all([
    loadUpkeep({ clock: systemClock }),
    loadBackupList(),
    loadLastRestore(),
    loadDemoStanding(),
  ])
  const { now, timeZone } = facts
  const checks = upkeepChecks(facts)
  return (
    <>
      <KeepFresh />
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>{upkeepHeadline(checks)}</h1>
          <p>What Kilnward needs to go on: its worker, its air, its disk and its backups. As of {formatMoment(now, now, timeZone)}.</p>
        </div>
      </div>
      <div className="upkeep">
        <div className="upkeep-column">
          <section className="plate" aria-label="How it stands">
            <CheckList checks={checks} />
          </section>
          <DemoPlate standing={demo} />
        </div>
        <div className="upkeep-column">
          <section className="plate">
            <header>
              <h2>Backups</h2>
              <p>
                {BACKUPS_KEPT.hourly} hourly, {BACKUPS_KEPT.daily} daily and {BACKUPS_KEPT.monthly} monthly stay
              </p>
            </header>
            <div className="plate-body">
              <BackUpNow hasBackup={facts.backups.newest !== null} />
            </div>
            {backups.length > 0 && <BackupTable rows={backups} now={now} timeZone={timeZone} />}
            {backups.length === 0 && (
              <EmptyState title="No backup yet">
                The copies will stand here. The worker makes the first within ten minutes of its start.
              </EmptyState>
            )}
          </section>
          <section className="plate">
            <header>
              <h2>To restore one</h2>
              {restore && <p>last done {formatMoment(restore.at, now, timeZone)}</p>}
            </header>
            <div className="plate-body upkeep-restore">
              {restore && (
                <p>
                  <b>{restore.text}</b> {restore.fileName}, {formatMoment(restore.at, now, timeZone)}.
                </p>
              )}
              <ol>
                <li>Stop Kilnward on its machine.</li>
                <li>
                  <code>npm run restore</code> lists the backups.
                </li>
                <li>
                  <code>npm run restore -- NAME --set-aside</code> puts one in place. What lay there is moved into a dated folder, never
                  deleted.
                </li>
                <li>Start Kilnward. Everybody signs in again.</li>
              </ol>
              <p>
                A backup holds everything: people, every line of history, and what a thief would need to guess passwords at leisure. Keep it
                as you keep the keys of the house.
              </p>
            </div>
          </section>
        </div>
      </div>
    </>
  )
}
