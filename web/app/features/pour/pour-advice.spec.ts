import { describe, expect, it } from 'vitest';
import type { Design, Fragrance, Wax } from '#shared/contract/materials';
import { WAX_FAMILY_DEFAULTS } from '#shared/cure/wax-families';
import { studioFormats } from '../../core/time/studio-formats';
import { placesNeeded, pourAdvice } from './pour-advice';

const formats = studioFormats('Europe/Lisbon', 'C');
const wax: Wax = {
  ...{
    id: 'w',
    name: 'Meadow soy',
    family: 'soy-container',
    pourLow: 55,
    pourHigh: 65,
    provenance: '',
    version: 1,
  },
  kinetics: WAX_FAMILY_DEFAULTS['soy-container'].kinetics,
};
const fig: Fragrance = { id: 'f', name: 'Fig Leaf', flashPoint: 62, certificateMaxLoad: 8 };
const design = (loadPercentOfWax: number): Design => ({
  ...{
    id: 'd',
    name: 'Fig',
    waxId: 'w',
    fragranceId: 'f',
    loadPercentOfWax,
    wick: 'Cotton 12',
    vessel: 'Jar',
  },
  ...{ vesselDiameterMm: 75, fillGrams: 220, lastTest: null, version: 1 },
});

describe('advice for a pour', () => {
  it('weighs both and says the load both ways', () => {
    expect(pourAdvice(design(10), wax, null, 12, 58, formats)).toEqual({
      wax: '2400 g (84.7 oz)',
      fragrance: '240 g (8.5 oz)',
      load: '10.0 % of wax = 9.1 % of mix',
      mix: '2640 g (93.1 oz), 220 g (7.8 oz) a vessel',
      warnings: [],
    });
  });

  it('warns above the wax’s and the certificate’s maximum, above the flash point, outside the pouring range', () => {
    expect(pourAdvice(design(11), wax, fig, 1, 66, formats).warnings).toEqual([
      expect.stringMatching(/above what Meadow soy takes/),
      expect.stringMatching(/certificate of Fig Leaf: 9.9 % of mix, at most 8.0 %/),
      expect.stringMatching(/flash point of Fig Leaf \(62\s°C\)/),
      expect.stringMatching(/usually poured at 55\s°C to 65\s°C/),
    ]);
    expect(pourAdvice(design(6), wax, fig, 400, 66, studioFormats('America/Denver', 'F'))).toMatchObject({
      wax: '83.02 kg (2928.4 oz)',
      warnings: [expect.stringMatching(/^151\s°F is at .*\(144\s°F\)/), expect.stringMatching(/131\s°F/)],
    });
    expect(pourAdvice(design(6), wax, fig, 1, null, formats).warnings).toEqual([]);
  });

  it('counts the room a vessel takes by the square it stands on', () => {
    expect([placesNeeded(12, 75), placesNeeded(10, 150), placesNeeded(3, 80)]).toEqual([12, 40, 4]);
  });
});
