import type { ShiftHours } from '@/lib/schedule/shifts'

export type Foundry = { name: string; timeZone: string; isDemo: boolean; shiftHours: ShiftHours[] }

/** The foundry as every page needs it: its name, its zone and its opening hours. */
export function loadFoundry(): Promise<Foundry> {
  return Promise.resolve({
    name: 'Marram Lane Art Foundry',
    timeZone: 'Europe/London',
    isDemo: true,
    shiftHours: [1, 2, 3, 4, 5, 6].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 })),
  })
}
