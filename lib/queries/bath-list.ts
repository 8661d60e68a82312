import { QueryTypes } from 'sequelize'
import type { BathKind } from '@/lib/coats/bath-input'
import { database } from '@/models'

export type BathRow = {
  id: string
  name: string
  /** Demo data in a foundry that is not the demo itself. */
  isDemo: boolean
  kind: BathKind
  retiredAt: number | null
  stirredAt: number | null
  stirredBy: string | null
}

/** The baths, face baths first, each with when it was last stirred. */
export async function loadBathList(): Promise<{ inUse: BathRow[]; retired: BathRow[] }> {
  const found = await database.query<Omit<BathRow, 'isDemo'> & { isDemo: number }>(
    `SELECT b.id, b.name, b.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo, b.kind, b.retired_at AS retiredAt, s.stirred_at AS stirredAt, m.name AS stirredBy
       FROM baths b
       LEFT JOIN bath_stirs s ON s.id = (SELECT id FROM bath_stirs WHERE bath_id = b.id ORDER BY stirred_at DESC LIMIT 1)
       LEFT JOIN members m ON m.id = s.member_id
      ORDER BY b.kind DESC, b.name`,
    { type: QueryTypes.SELECT },
  )
  const rows = found.map((row): BathRow => ({ ...row, isDemo: row.isDemo === 1 }))
  return { inUse: rows.filter(({ retiredAt }) => retiredAt === null), retired: rows.filter(({ retiredAt }) => retiredAt !== null) }
}
