import type { Design, Fragrance, Wax } from '#shared/contract/materials';
import { loadOfMix, pourGrams } from '#shared/cure/load';
import { toOunces } from '#shared/units/mass';
import type { StudioFormats } from '../../core/time/studio-formats';
import { figure } from '../../core/units/measure-words';

/** What to weigh, both ways of saying the load, and what to mind. */
export interface PourAdvice {
  readonly wax: string;
  readonly fragrance: string;
  /** "8.0 % of wax = 7.4 % of mix" */
  readonly load: string;
  /** What it comes to, and each vessel's share. */
  readonly mix: string;
  readonly warnings: readonly string[];
}

/**
 * Grams for a pour and what is unusual about it. No verdict on any standard or law.
 * @param pourCelsius pouring temperature, null when not given
 */
export function pourAdvice(
  design: Design,
  wax: Wax,
  fragrance: Fragrance | null,
  vessels: number,
  pourCelsius: number | null,
  formats: Pick<StudioFormats, 'temperature'>,
): PourAdvice {
  const grams = pourGrams(design.fillGrams, vessels, design.loadPercentOfWax);
  const ofMix = loadOfMix(design.loadPercentOfWax);
  const degrees = (celsius: number) => formats.temperature(celsius, 0);
  const warnings: string[] = [];
  if (design.loadPercentOfWax > wax.kinetics.maxLoad) {
    warnings.push(
      `The load is above what ${wax.name} takes (${figure(wax.kinetics.maxLoad, 1)} % of wax): fragrance may sweat out and burn badly.`,
    );
  }
  if (fragrance?.certificateMaxLoad !== null && fragrance !== null && ofMix > fragrance.certificateMaxLoad) {
    warnings.push(
      `The load is above the certificate of ${fragrance.name}: ${figure(ofMix, 1)} % of mix, at most ${figure(fragrance.certificateMaxLoad, 1)} %.`,
    );
  }
  if (
    pourCelsius !== null &&
    fragrance !== null &&
    fragrance.flashPoint !== null &&
    pourCelsius >= fragrance.flashPoint
  ) {
    warnings.push(
      `${degrees(pourCelsius)} is at or above the flash point of ${fragrance.name} (${degrees(fragrance.flashPoint)}): a fire hazard at the pot. Pour cooler.`,
    );
  }
  if (pourCelsius !== null && (pourCelsius < wax.pourLow || pourCelsius > wax.pourHigh)) {
    warnings.push(
      `${wax.name} is usually poured at ${degrees(wax.pourLow)} to ${degrees(wax.pourHigh)} (common practice, no source).`,
    );
  }
  return {
    wax: mass(grams.wax),
    fragrance: grams.fragrance === 0 ? 'none' : mass(grams.fragrance),
    mix: `${mass(grams.wax + grams.fragrance)}, ${mass(design.fillGrams)} a vessel`,
    load: `${figure(design.loadPercentOfWax, 1)} % of wax = ${figure(ofMix, 1)} % of mix`,
    warnings,
  };
}

const CAPACITY_VESSEL_MM = 75;

/**
 * Room that vessels take on a shelf, in the vessels of 75 mm its capacity is counted in: by the square each stands on, rounded
 * up. Worked value: 10 vessels of 150 mm take the room of 40.
 */
export function placesNeeded(vessels: number, diameterMm: number): number {
  return Math.ceil(vessels * (diameterMm / CAPACITY_VESSEL_MM) ** 2 - 1e-9);
}

const KILOGRAM = 1000;

/** "97.8 g (3.4 oz)", "12.35 kg (435.6 oz)" */
function mass(grams: number): string {
  const metric =
    grams < 10 * KILOGRAM ? `${figure(grams, grams < 100 ? 1 : 0)} g` : `${figure(grams / KILOGRAM, 2)} kg`;
  return `${metric} (${figure(toOunces(grams), 1)} oz)`;
}
