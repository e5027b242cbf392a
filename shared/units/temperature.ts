/** Kelvin of 0 °C (definition of the Celsius scale). */
export const KELVIN_OFFSET = 273.15;

/** °C to °F. Worked value: 25 °C → 77 °F. */
export function toFahrenheit(celsius: number): number {
  return (celsius * 9) / 5 + 32;
}

/** °F to °C. Worked value: 77 °F → 25 °C. */
export function fromFahrenheit(fahrenheit: number): number {
  return ((fahrenheit - 32) * 5) / 9;
}

/** A temperature difference in K as a difference in °F. Worked value: 2 K → 3.6 °F. */
export function differenceInFahrenheit(kelvin: number): number {
  return (kelvin * 9) / 5;
}

/** K to °C. Worked value: 294.15 K → 21 °C. */
export function fromKelvin(kelvin: number): number {
  return kelvin - KELVIN_OFFSET;
}
