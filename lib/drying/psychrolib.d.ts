/** The few functions of psychrolib 1.1.1 that are called here; the package ships no types. In SI: degC, RH as a fraction, Pa, kg/kg. */
declare module 'psychrolib' {
  const psychrolib: {
    readonly SI: number
    SetUnitSystem(unitSystem: number): void
    GetTWetBulbFromRelHum(tDryBulb: number, relHum: number, pressure: number): number
    GetTWetBulbFromHumRatio(tDryBulb: number, humRatio: number, pressure: number): number
    GetTDewPointFromRelHum(tDryBulb: number, relHum: number): number
    GetVapPresFromRelHum(tDryBulb: number, relHum: number): number
    GetSatVapPres(tDryBulb: number): number
    GetSatHumRatio(tDryBulb: number, pressure: number): number
    GetHumRatioFromRelHum(tDryBulb: number, relHum: number, pressure: number): number
    GetHumRatioFromTWetBulb(tDryBulb: number, tWetBulb: number, pressure: number): number
    GetMoistAirDensity(tDryBulb: number, humRatio: number, pressure: number): number
    GetMoistAirVolume(tDryBulb: number, humRatio: number, pressure: number): number
    GetStandardAtmPressure(altitude: number): number
  }
  export default psychrolib
}
