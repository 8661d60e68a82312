/**
 * The clock's own figures, for the functions and for the door alike. Source: our own model, recomputed with psychrolib and an
 * independent implementation. Tolerances: 3e-4 on room factors (psychrolib stops 0.0005 K short of the wet bulb), half the last digit
 * on place factors.
 */
export const ROOM_FACTORS = [
  { airTempC: 21, relHumidityPct: 50, altitudeM: 0, expected: 1 },
  { airTempC: 18, relHumidityPct: 50, altitudeM: 0, expected: 0.9141 },
  { airTempC: 24, relHumidityPct: 40, altitudeM: 0, expected: 1.3395 },
  { airTempC: 24, relHumidityPct: 50, altitudeM: 0, expected: 1.0865 },
  { airTempC: 27, relHumidityPct: 50, altitudeM: 0, expected: 1.1729 },
  { airTempC: 21, relHumidityPct: 30, altitudeM: 0, expected: 1.4703 },
  { airTempC: 21, relHumidityPct: 65, altitudeM: 0, expected: 0.6761 },
  { airTempC: 18, relHumidityPct: 75, altitudeM: 0, expected: 0.4345 },
  { airTempC: 16, relHumidityPct: 85, altitudeM: 0, expected: 0.2412 },
  { airTempC: 25, relHumidityPct: 60, altitudeM: 0, expected: 0.8686 },
  { airTempC: 21, relHumidityPct: 50, altitudeM: 1600, expected: 1.0724 },
  { airTempC: 24, relHumidityPct: 30, altitudeM: 1600, expected: 1.7281 },
] as const

export const PLACE_FACTORS = [
  { airSpeedMps: 0, altitudeM: 0, expected: 0.5214 },
  { airSpeedMps: 0.1, altitudeM: 0, expected: 0.5214 },
  { airSpeedMps: 0.25, altitudeM: 0, expected: 0.65 },
  { airSpeedMps: 0.5, altitudeM: 0, expected: 0.795 },
  { airSpeedMps: 0.75, altitudeM: 0, expected: 0.9062 },
  { airSpeedMps: 1, altitudeM: 0, expected: 1 },
  { airSpeedMps: 1.5, altitudeM: 0, expected: 1.1573 },
  { airSpeedMps: 2, altitudeM: 0, expected: 1.2899 },
  { airSpeedMps: 3, altitudeM: 0, expected: 1.5124 },
  { airSpeedMps: 0.1, altitudeM: 1600, expected: 0.501 },
  { airSpeedMps: 0.5, altitudeM: 1600, expected: 0.7494 },
  { airSpeedMps: 1, altitudeM: 1600, expected: 0.9355 },
  { airSpeedMps: 2, altitudeM: 1600, expected: 1.1988 },
] as const
