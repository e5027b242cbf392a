import type { Design, Fragrance, Wax } from '#shared/contract/materials';
import { loadOfMix, pourGrams } from '#shared/cure/load';
import { toOunces } from '#shared/units/mass';
import { figure } from '../../core/units/measure-words';

/** What to weigh, both ways of saying the load, and what to mind. */
export interface PourAdvice {
  readonly wax: string;
  readonly fragrance: string;
  readonly load: string;
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
): PourAdvice {
  const grams = pourGrams(design.fillGrams, vessels, design.loadPercentOfWax);
  const ofMix = loadOfMix(design.loadPercentOfWax);
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
      `${figure(pourCelsius, 0)} °C is at or above the flash point of ${fragrance.name} (${figure(fragrance.flashPoint, 0)} °C): a fire hazard at the pot. Pour cooler.`,
    );
  }
  if (pourCelsius !== null && (pourCelsius < wax.pourLow || pourCelsius > wax.pourHigh)) {
    warnings.push(
      `${wax.name} is usually poured at ${figure(wax.pourLow, 0)} to ${figure(wax.pourHigh, 0)} °C (common practice, no source).`,
    );
  }
  return {
    wax: mass(grams.wax),
    fragrance: grams.fragrance === 0 ? 'none' : mass(grams.fragrance),
    load: `${figure(design.loadPercentOfWax, 1)} % of wax = ${figure(ofMix, 1)} % of mix`,
    warnings,
  };
}

function mass(grams: number): string {
  return `${figure(grams, grams < 100 ? 1 : 0)} g (${figure(toOunces(grams), 1)} oz)`;
}
