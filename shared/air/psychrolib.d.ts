declare module 'psychrolib' {
  /** The parts of psychrolib (ASHRAE Handbook of Fundamentals 2017 in code) that are used here; SI units. */
  interface Psychrometrics {
    readonly SI: unknown;
    SetUnitSystem(system: unknown): void;
    /** Pa at °C */
    GetSatVapPres(celsius: number): number;
    /** °C at °C and 0–1 */
    GetTDewPointFromRelHum(celsius: number, relativeHumidity: number): number;
    /** kg/kg at °C, 0–1, Pa */
    GetHumRatioFromRelHum(celsius: number, relativeHumidity: number, pascal: number): number;
  }
  const psychrolib: Psychrometrics;
  export default psychrolib;
}
