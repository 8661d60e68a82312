'use client'

import { createContext, useContext, type ReactNode } from 'react'
import { SI_UNITS, type Units } from '@/lib/format/units'

const UnitsContext = createContext<Units>(SI_UNITS)

/** The units of the member in front of this screen. What all screens share, such as the queue, stays in °C, kg and mm. */
export function UnitsProvider({ units, children }: { units: Units; children: ReactNode }) {
  return <UnitsContext value={units}>{children}</UnitsContext>
}

export const useUnits = (): Units => useContext(UnitsContext)
