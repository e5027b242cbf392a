import { differenceInFahrenheit, fromFahrenheit, toFahrenheit } from '#shared/units/temperature';
import type { TemperatureUnit } from './units';

const MINUS = '−';
const SPACE = '\u00a0';

/** A number with a true minus sign and no negative zero. Worked value: (−0.04, 1) → "0.0". */
export function figure(value: number, digits: number): string {
  const text = value.toFixed(digits);
  if (Number(text) === 0) return text.replace('-', '');
  return text.replace('-', MINUS);
}

/** "°C" or "°F". */
export function unitSign(unit: TemperatureUnit): string {
  return unit === 'C' ? '°C' : '°F';
}

/** A temperature's figure alone. Worked value: (25, 'F') → "77.0". */
export function temperatureFigure(celsius: number, unit: TemperatureUnit, digits = 1): string {
  return figure(unit === 'C' ? celsius : toFahrenheit(celsius), digits);
}

/** A temperature with its unit. Worked value: (26.14, 'C') → "26.1 °C". */
export function temperature(celsius: number, unit: TemperatureUnit, digits = 1): string {
  return `${temperatureFigure(celsius, unit, digits)}${SPACE}${unitSign(unit)}`;
}

/** A difference of temperatures, K in. Worked value: (2, 'F') → "3.6 °F". */
export function temperatureDifference(kelvin: number, unit: TemperatureUnit, digits = 1): string {
  return `${figure(unit === 'C' ? kelvin : differenceInFahrenheit(kelvin), digits)}${SPACE}${unitSign(unit)}`;
}

/** What a person typed in their unit, as °C. Worked value: (77, 'F') → 25. */
export function typedCelsius(value: number, unit: TemperatureUnit): number {
  return unit === 'C' ? value : fromFahrenheit(value);
}

/** Relative humidity in whole per cent. Worked value: 51.4 → "51 %". */
export function humidityWords(percent: number): string {
  return `${figure(percent, 0)}${SPACE}%`;
}

/** A share 0–1 in per cent. Worked value: 0.934 → "93 %". */
export function shareWords(share: number, digits = 0): string {
  return `${figure(share * 100, digits)}${SPACE}%`;
}
