import type { DoorDescription } from '@/lib/server/doors/door'
import { FLOOR_DOORS } from '@/lib/server/doors/floor'
import { NOTICE_DOORS } from '@/lib/server/doors/notices'
import { PROGRAM_DOORS } from '@/lib/server/doors/program'
import { READING_DOORS } from '@/lib/server/doors/readings'
import { ROOM_DOORS } from '@/lib/server/doors/room'
import { UPLOAD_DOORS } from '@/lib/server/doors/uploads'

/** Every method of every route under /api/v1, and /api/health. A test fails on one that is missing, and on one that is gone. */
export const DESCRIBED_DOORS: readonly DoorDescription[] = [
  ...READING_DOORS,
  ...ROOM_DOORS,
  ...UPLOAD_DOORS,
  ...FLOOR_DOORS,
  ...NOTICE_DOORS,
  ...PROGRAM_DOORS,
]
