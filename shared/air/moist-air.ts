import psychrolib from 'psychrolib';
import { KELVIN_OFFSET } from '#shared/units/temperature';
import { within } from '#shared/units/checked';

psychrolib.SetUnitSystem(psychrolib.SI);

/** Standard atmosphere in hPa. */
export const STANDARD_PRESSURE_HPA = 1013.25;
/** A dew point at 0 % humidity does not exist; drier air than this is taken as this dry. */
const DRIEST_PERCENT = 0.1;
const COLDEST = -45;
const WARMEST = 100;
/** Specific gas constant of water vapour, J/(kg·K). */
const WATER_VAPOUR_GAS_CONSTANT = 461.5;

/**
 * Saturation vapour pressure over water or, below 0.01 °C, over ice, in hPa.
 * ASHRAE Handbook of Fundamentals 2017, chapter 1, equations 5 and 6, as computed by psychrolib.
 * @param celsius dry-bulb temperature, −45 to 100 °C
 * @throws QuantityError outside that range. Worked value: 20 °C → 23.388 hPa.
 */
export function saturationPressure(celsius: number): number {
  return psychrolib.GetSatVapPres(within(celsius, COLDEST, WARMEST, 'Temperature in °C')) / 100;
}

/**
 * Dew point in °C (ASHRAE 2017, chapter 1, equations 5, 6 inverted; psychrolib).
 * @param celsius dry-bulb temperature, −45 to 100 °C
 * @param humidityPercent relative humidity, 0 to 100 %
 * @throws QuantityError outside those ranges. Worked value: 20 °C, 50 % → 9.272 °C.
 */
export function dewPoint(celsius: number, humidityPercent: number): number {
  within(celsius, COLDEST, WARMEST, 'Temperature in °C');
  within(humidityPercent, 0, 100, 'Relative humidity in %');
  return psychrolib.GetTDewPointFromRelHum(celsius, Math.max(humidityPercent, DRIEST_PERCENT) / 100);
}

/**
 * Humidity ratio in kg water per kg dry air (ASHRAE 2017, chapter 1, equations 20 and 22; psychrolib).
 * @param pressureHpa total pressure, 500 to 1100 hPa
 * @throws QuantityError outside the ranges. Worked value: 20 °C, 50 %, 1013.25 hPa → 0.007262.
 */
export function humidityRatio(
  celsius: number,
  humidityPercent: number,
  pressureHpa = STANDARD_PRESSURE_HPA,
): number {
  within(celsius, COLDEST, WARMEST, 'Temperature in °C');
  within(humidityPercent, 0, 100, 'Relative humidity in %');
  within(pressureHpa, 500, 1100, 'Pressure in hPa');
  return psychrolib.GetHumRatioFromRelHum(celsius, humidityPercent / 100, pressureHpa * 100);
}

/**
 * Relative humidity in % of air with a given humidity ratio (the inverse of humidityRatio); capped at 100.
 * Worked value: 20 °C, 0.007262, 1013.25 hPa → 50 %.
 */
export function relativeHumidity(
  celsius: number,
  ratio: number,
  pressureHpa = STANDARD_PRESSURE_HPA,
): number {
  const vapourPressure = (pressureHpa * ratio) / (0.621945 + ratio);
  return Math.min(100, (100 * vapourPressure) / saturationPressure(celsius));
}

/**
 * Saturation vapour pressure over water in hPa by the Magnus form of WMO-No. 8, part I, chapter 4 (Sonntag 1990):
 * 6.112·exp(17.62·T/(243.12+T)), T in °C. Simpler than the ASHRAE form; kept for checks and for absolute humidity.
 */
export function magnusSaturationPressure(celsius: number): number {
  within(celsius, COLDEST, 60, 'Temperature in °C');
  return 6.112 * Math.exp((17.62 * celsius) / (243.12 + celsius));
}

/** Dew point in °C by the same Magnus form inverted. Worked value: 20 °C, 50 % → 9.255 °C. */
export function magnusDewPoint(celsius: number, humidityPercent: number): number {
  within(celsius, COLDEST, 60, 'Temperature in °C');
  within(humidityPercent, DRIEST_PERCENT, 100, 'Relative humidity in %');
  const gamma = Math.log(humidityPercent / 100) + (17.62 * celsius) / (243.12 + celsius);
  return (243.12 * gamma) / (17.62 - gamma);
}

/**
 * Absolute humidity in g water per m³ air: vapour pressure (Magnus form) over the gas constant of water vapour.
 * Worked value: 20 °C, 50 % → 8.621 g/m³.
 */
export function absoluteHumidity(celsius: number, humidityPercent: number): number {
  within(humidityPercent, 0, 100, 'Relative humidity in %');
  const pascal = humidityPercent * magnusSaturationPressure(celsius);
  return (pascal * 1000) / (WATER_VAPOUR_GAS_CONSTANT * (celsius + KELVIN_OFFSET));
}
