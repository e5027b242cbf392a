import type { PairComparison, StudioComparison } from '#shared/contract/compare';
import type { TemperatureUnit } from '../../core/units/units';
import { figure, temperature, temperatureDifference } from '../../core/units/measure-words';

/** A measure studios are compared by. */
export interface Measure {
  readonly name: string;
  readonly about: string;
  readonly read: (studio: StudioComparison) => number | null;
  readonly write: (value: number, unit: TemperatureUnit) => string;
}

export const MEASURES: readonly Measure[] = [
  {
    name: 'Time in band',
    about: 'share of what was observed',
    read: ({ inBand }) => inBand,
    write: (value) => `${figure(value * 100, 1)} %`,
  },
  {
    name: 'Mean kinetic temperature',
    about: 'warm hours weigh more than cold ones',
    read: ({ meanKineticCelsius }) => meanKineticCelsius,
    write: (value, unit) => temperature(value, unit),
  },
  {
    name: 'Daily swing',
    about: 'mean range of the local days',
    read: ({ dailySwing }) => dailySwing,
    write: (value, unit) => temperatureDifference(value, unit),
  },
  {
    name: 'Alerts a room and day',
    about: '2 at most is the usual target (ISA-18.2, value from memory)',
    read: ({ alertsPerRoomDay }) => alertsPerRoomDay,
    write: (value) => figure(value, 2),
  },
  {
    name: 'Time to answer an alert',
    about: 'median from raised to acknowledged',
    read: ({ minutesToAnswer }) => minutesToAnswer,
    write: (value) => `${figure(value, 0)} min`,
  },
];

/** What may be said of two studios for one wax family. */
export function pairSentence(
  pair: PairComparison,
  nameOf: (studioId: string) => string,
  family: string,
): string {
  const [a, b] = [nameOf(pair.studioA), nameOf(pair.studioB)];
  if (pair.verdict === 'no-clear-difference' || pair.difference === null) {
    return `${family}, ${a} and ${b}: no clear difference${intervalOf(pair)}.`;
  }
  const way = pair.difference > 0 ? 'longer' : 'shorter';
  return `${family}: batches take ${figure(Math.abs(pair.difference), 2)} days ${way} in ${a} than in ${b}${intervalOf(pair)}.`;
}

/** For pairs about which nothing may be said yet. */
export function tooFewSentence(pairs: number): string {
  return `For ${pairs} ${pairs === 1 ? 'pair' : 'pairs'} of studios and wax there are too few batches to say anything; 8 in each studio are needed.`;
}

function intervalOf({ low, high, pAdjusted }: PairComparison): string {
  if (low === null || high === null) return '';
  const p = pAdjusted === null ? '' : `, adjusted p ${figure(pAdjusted, 3)}`;
  return ` (95 %: ${figure(low, 2)} to ${figure(high, 2)} days${p})`;
}

/** A cell of a CSV file; text that a spreadsheet would take for a formula is made harmless. */
export function csvCell(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  const harmless = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\n]/.test(harmless) ? `"${harmless.replaceAll('"', '""')}"` : harmless;
}

/** The comparison as CSV, °C and K. */
export function comparisonCsv(studios: readonly StudioComparison[]): string {
  const head = [
    'studio',
    'observed hours',
    'in band',
    'mean C',
    'mean kinetic C',
    'daily swing K',
    'alerts per room-day',
    'minutes to answer',
  ];
  const rows = studios.map((studio) => [
    ...[
      studio.studioName,
      studio.observedHours,
      studio.inBand,
      studio.meanCelsius,
      studio.meanKineticCelsius,
    ],
    ...[studio.dailySwing, studio.alertsPerRoomDay, studio.minutesToAnswer],
  ]);
  return [head, ...rows].map((row) => row.map(csvCell).join(',')).join('\r\n');
}
