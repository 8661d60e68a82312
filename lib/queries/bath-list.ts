import { QueryTypes } from 'sequelize'
import type { BathKind } from '@/lib/coats/bath-input'
import { database } from '@/models'

export type BathRow = {
  id: string
  name: string
  kind: BathKind
  retiredAt: number | null
  stirredAt: number | null
  stirredBy: string | null
}

/** The baths, face baths first, each with when it was last stirred. */
export async function loadBathList(): Promise<{ inUse: BathRow[]; retired: BathRow[] }> {
  const rows = await database.query<BathRow>(
    `SELECT b.id, b.name, b.kind, b.retired_at AS retiredAt, s.stirred_at AS stirredAt, m.name AS stirredBy
       FROM baths b
       LEFT JOIN bath_stirs s ON s.id = (SELECT id FROM bath_stirs WHERE bath_id = b.id ORDER BY stirred_at DESC LIMIT 1)
       LEFT JOIN members m ON m.id = s.member_id
      ORDER BY b.kind DESC, b.name`,
    { type: QueryTypes.SELECT },
  )
  return { inUse: rows.filter(({ retiredAt }) => retiredAt === null), retired: rows.filter(({ retiredAt }) => retiredAt !== null) }
}
