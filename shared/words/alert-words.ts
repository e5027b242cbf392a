import type { AlertFacts } from '#shared/contract/alerts';
import { codes, type RoomFormats, tradeName } from '#shared/words/room-state';

/** An alert in words, made from its facts for one unit and time zone. */
export interface AlertWords {
  /** "Too warm for 3 soy batches since 14:20" */
  readonly headline: string;
  /** "26.1 °C, limit 25.0, worst 26.4." */
  readonly figures: string;
  /** "Move L-118, L-121 and L-122, or cool the room by 1.1 °C." */
  readonly act: string;
}

/** Where it is: "Quay Street, Loft". */
export function alertPlace(facts: Pick<AlertFacts, 'studioName' | 'roomName'>): string {
  return facts.roomName === null ? facts.studioName : `${facts.studioName}, ${facts.roomName}`;
}

/**
 * What is the matter, how bad, and what to do.
 * @param now epoch ms, from which times are told
 */
export function alertWords(facts: AlertFacts, formats: RoomFormats, now: number): AlertWords {
  const since = `since ${formats.timeSeenFrom(facts.since, now)}`;
  switch (facts.kind) {
    case 'too-warm':
      return tooWarm(facts, formats, since);
    case 'too-cold':
      return tooCold(facts, formats, since);
    case 'too-damp':
      return {
        headline: `Too damp ${since}`,
        figures: figures(facts, formats.humidity),
        act: 'Dry or air the room; labels and boxes suffer first, and mould follows after days above 80 %.',
      };
    case 'condensation':
      return {
        headline: `Close to condensation ${since}`,
        figures: `Coldest surface about ${temperature(facts.value, formats)}, dew point ${temperature(facts.dewPoint, formats)}.`,
        act: 'Warm the room gently or dry it; do not label or box until the glass is dry.',
      };
    case 'swinging':
      return {
        headline: `Swinging ${since}`,
        figures: `${figures(facts, (kelvin) => formats.difference(kelvin))} Range of the last 24 hours.`,
        act: 'Look for a draught, a door or a heater that cycles; swings frost wax that tends to it.',
      };
    case 'silent':
      return {
        headline: `${sensorOf(facts)} is silent ${since}`,
        figures:
          facts.lastHeardAt === null
            ? 'Never heard.'
            : `Last heard ${formats.timeSeenFrom(facts.lastHeardAt, now)}.`,
        act: 'Check its power and its connection; dates in this room widen by the hour until it is heard again.',
      };
    case 'stuck':
      return {
        headline: `${sensorOf(facts)} repeats one value ${since}`,
        figures: facts.value === null ? '' : `Always ${formats.temperature(facts.value, 2)}.`,
        act: 'Restart it or swap it, and stop trusting it in the settings until it moves again.',
      };
    case 'battery':
      return {
        headline: `${sensorOf(facts)} has little battery left ${since}`,
        figures: figures(facts, (percent) => `${Math.round(percent)} %`),
        act: 'Change the battery before the sensor falls silent.',
      };
    case 'intake-silent':
      return {
        headline: `Nothing is heard from any sensor ${since}`,
        figures:
          facts.lastHeardAt === null ? '' : `Last heard ${formats.timeSeenFrom(facts.lastHeardAt, now)}.`,
        act: 'Check the network of the studio first: one cause covers all its sensors.',
      };
  }
}

/** The alert as one sentence with its figures. */
export function alertSentence(facts: AlertFacts, formats: RoomFormats, now: number): string {
  const words = alertWords(facts, formats, now);
  return words.figures === '' ? `${words.headline}.` : `${words.headline}: ${words.figures}`;
}

/** What is told when it is over: how long it lasted and how bad it got. */
export function clearedSentence(facts: AlertFacts, formats: RoomFormats, clearedAt: number): string {
  const lasted = formats.duration(clearedAt - Date.parse(facts.since));
  const worst = facts.worst === null ? '' : `, at worst ${valueInWords(facts, facts.worst, formats)}`;
  return `Over: ${subject(facts)} lasted ${lasted}${worst}.`;
}

/** "3 soy batches", "1 batch", '' for none. */
function batchesInWords(facts: AlertFacts): string {
  const count = facts.batches.length;
  if (count === 0) return '';
  const trades = new Set(facts.batches.map((batch) => tradeName(batch.waxFamily)));
  const [trade] = trades;
  return `${count} ${trades.size === 1 ? `${trade} ` : ''}${count === 1 ? 'batch' : 'batches'}`;
}

function tooWarm(facts: AlertFacts, formats: RoomFormats, since: string): AlertWords {
  const forWhom = batchesInWords(facts);
  const over = facts.value === null || facts.limit === null ? 0 : facts.value - facts.limit;
  const cool = over > 0.05 ? `cool the room by ${formats.difference(over)}` : 'keep the room cooler';
  return {
    headline: `Too warm${forWhom === '' ? '' : ` for ${forWhom}`} ${since}`,
    figures: figures(facts, (celsius) => formats.temperature(celsius)),
    act: forWhom === '' ? sentence(cool) : `Move ${codes(facts.batches)}, or ${cool}.`,
  };
}

function tooCold(facts: AlertFacts, formats: RoomFormats, since: string): AlertWords {
  const forWhom = batchesInWords(facts);
  const now =
    facts.celsius === undefined || facts.celsius === null ? '' : `${formats.temperature(facts.celsius)}: `;
  return {
    headline: `Too cold to cure${forWhom === '' ? '' : ` for ${forWhom}`} ${since}`,
    figures: `${now}dates slip by ${days(facts.value)}, limit ${days(facts.limit)}.`,
    act: facts.batches.length === 0 ? 'Warm the room.' : `Warm the room, or move ${codes(facts.batches)}.`,
  };
}

function figures(facts: AlertFacts, write: (value: number) => string): string {
  const parts = [
    facts.value === null ? '' : write(facts.value),
    facts.limit === null ? '' : `limit ${write(facts.limit)}`,
    facts.worst === null || facts.worst === facts.value ? '' : `worst ${write(facts.worst)}`,
  ].filter((part) => part !== '');
  return parts.length === 0 ? '' : `${parts.join(', ')}.`;
}

/** A value of an alert with its unit, e.g. a worst or a step. */
export function valueInWords(facts: AlertFacts, value: number, formats: RoomFormats): string {
  switch (facts.kind) {
    case 'too-cold':
      return days(value);
    case 'too-damp':
      return formats.humidity(value);
    case 'swinging':
      return formats.difference(value);
    case 'battery':
      return `${Math.round(value)} %`;
    case 'too-warm':
    case 'condensation':
    case 'stuck':
    case 'silent':
    case 'intake-silent':
      return formats.temperature(value);
  }
}

function subject(facts: AlertFacts): string {
  switch (facts.kind) {
    case 'too-warm':
      return 'too warm';
    case 'too-cold':
      return 'too cold to cure';
    case 'too-damp':
      return 'too damp';
    case 'condensation':
      return 'close to condensation';
    case 'swinging':
      return 'swinging';
    case 'silent':
      return `the silence of ${sensorOf(facts)}`;
    case 'stuck':
      return `one value from ${sensorOf(facts)}`;
    case 'battery':
      return `little battery in ${sensorOf(facts)}`;
    case 'intake-silent':
      return 'the silence of all sensors';
  }
}

function sensorOf(facts: AlertFacts): string {
  return facts.sensorName ?? 'The sensor';
}

function temperature(celsius: number | null, formats: RoomFormats): string {
  return celsius === null ? 'unknown' : formats.temperature(celsius);
}

function days(value: number | null): string {
  if (value === null) return 'an unknown time';
  const rounded = Math.round(value * 10) / 10;
  return `${rounded.toLocaleString('en-GB')} ${rounded === 1 ? 'day' : 'days'}`;
}

function sentence(text: string): string {
  return `${text.charAt(0).toUpperCase()}${text.slice(1)}.`;
}
