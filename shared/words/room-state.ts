import type { BatchCard } from '#shared/contract/batches';
import type { RoomNow } from '#shared/contract/overview';
import type { RoomLimits } from '#shared/contract/rooms';
import { list } from '#shared/words/lists';

/** How figures and times are written; each studio has its own. Instants are ISO 8601 or epoch ms. */
export interface RoomFormats {
  /** "26.1 °C" of °C */
  readonly temperature: (celsius: number, digits?: number) => string;
  /** "26.1" of °C */
  readonly temperatureFigure: (celsius: number, digits?: number) => string;
  /** "1.1 °C" of a difference in K */
  readonly difference: (kelvin: number, digits?: number) => string;
  /** "51 %" */
  readonly humidity: (percent: number) => string;
  /** "14:20", "yesterday 14:20", "Fri 8 May 14:20" */
  readonly timeSeenFrom: (instant: string | number, now: number) => string;
  /** "14 min", "31 h", "9 days" of ms */
  readonly duration: (ms: number) => string;
}

export interface RoomFacts {
  readonly now: RoomNow;
  readonly limits: RoomLimits;
  /** Curing batches standing in the room. */
  readonly batches: readonly BatchCard[];
  readonly racks: number;
}

/** A state in words: `lead` says what is the matter, `rest` the figures and what to do. */
export interface StateWords {
  readonly lead: string;
  readonly rest: string;
}

const SPOKEN_SLIP_HOURS = 1;

/**
 * The state of a room as a maker would say it.
 * @param now epoch ms
 */
export function roomState(facts: RoomFacts, formats: RoomFormats, now: number): StateWords {
  switch (facts.now.condition) {
    case 'never-heard':
      return { lead: 'No sensor has been heard here yet.', rest: stock(facts) };
    case 'silent':
      return silent(facts, formats, now);
    case 'heat':
      return tooWarm(facts, formats, now);
    case 'cold':
      return tooCold(facts, formats, now);
    case 'damp':
      return tooDamp(facts, formats, now);
    case 'swinging':
      return {
        lead: `Swinging${since(facts.now, formats, now)}:`,
        rest: `more than ${formats.difference(facts.limits.swingLimit)} within a day. Look for a draught, a door or a heater that cycles.`,
      };
    case 'fine':
      return fine(facts, formats, now);
  }
}

function silent({ now: room, batches }: RoomFacts, formats: RoomFormats, now: number): StateWords {
  if (room.at === null) return { lead: 'No reading.', rest: '' };
  const last =
    room.celsius === null
      ? ''
      : `Last ${formats.temperature(room.celsius)} at ${formats.timeSeenFrom(room.at, now)}. `;
  const dates = batches.length > 0 ? 'Dates below use the forecast and widen by the hour.' : '';
  return { lead: `No reading for ${formats.duration(now - Date.parse(room.at))}.`, rest: `${last}${dates}` };
}

function tooWarm({ now: room, limits, batches }: RoomFacts, formats: RoomFormats, now: number): StateWords {
  const limit = room.heatLimit ?? limits.bandHigh;
  const atRisk = batches.filter((batch) => batch.atRisk);
  const forWhom = atRisk.length > 0 ? ` for ${batchesOf(atRisk)}` : '';
  const figures = [
    reading(room, formats, `limit ${formats.temperatureFigure(limit)}`),
    room.peakToday === null ? '' : `Peak today ${formats.temperatureFigure(room.peakToday)}.`,
  ];
  const over = room.celsius === null ? 0 : room.celsius - limit;
  const cool = over > 0.05 ? `cool the room by ${formats.difference(over)}` : 'keep the room cooler';
  const act = atRisk.length > 0 ? `Move ${codes(atRisk)}, or ${cool}.` : `${capital(cool)}.`;
  return {
    lead: `Too warm${forWhom}${since(room, formats, now)}:`,
    rest: joined([...figures, act]),
  };
}

function tooCold({ now: room, limits, batches }: RoomFacts, formats: RoomFormats, now: number): StateWords {
  const lasting = room.since === null ? '' : ` for ${formats.duration(now - Date.parse(room.since))}`;
  const slipped =
    room.slippedHours >= SPOKEN_SLIP_HOURS
      ? `dates have slipped by ${Math.round(room.slippedHours)} h since yesterday.`
      : batches.length > 0
        ? 'dates here will slip.'
        : '';
  const figures =
    room.celsius === null ? '' : `now ${formats.temperature(room.celsius)}${slipped ? ';' : '.'}`;
  return {
    lead: `Colder than ${formats.temperature(limits.bandLow, 0)}${lasting}:`,
    rest: joined([figures, slipped]),
  };
}

function tooDamp({ now: room, limits }: RoomFacts, formats: RoomFormats, now: number): StateWords {
  const humidity = room.humidity === null ? '' : `${formats.humidity(room.humidity)} humidity, `;
  const dew = room.dewPoint === null ? '' : `, dew point ${formats.temperature(room.dewPoint)}`;
  return {
    lead: `Too damp${since(room, formats, now)}:`,
    rest: `${humidity}limit ${formats.humidity(limits.humidityHigh)}${dew}. Labels and boxes suffer first; dry or air the room.`,
  };
}

function fine(facts: RoomFacts, formats: RoomFormats, now: number): StateWords {
  const { now: room, limits } = facts;
  if (room.celsius !== null && room.celsius > limits.bandHigh) {
    const limit = room.heatLimit === null ? '' : `, heat limit ${formats.temperatureFigure(room.heatLimit)}`;
    return {
      lead: 'Above its band, not yet too warm:',
      rest: `${formats.temperature(room.celsius)}, band up to ${formats.temperatureFigure(limits.bandHigh)}${limit}.`,
    };
  }
  const lasting = room.since === null ? '' : ` for ${formats.duration(now - Date.parse(room.since))}`;
  const slip = Math.round(room.slippedHours);
  const dates =
    facts.batches.length === 0 || Math.abs(slip) < SPOKEN_SLIP_HOURS
      ? ''
      : slip > 0
        ? `Dates slipped by ${slip} h since yesterday.`
        : `Dates came ${-slip} h nearer since yesterday.`;
  return { lead: `In its band${lasting}.`, rest: joined([stock(facts), dates]) };
}

function reading(room: RoomNow, formats: RoomFormats, limit: string): string {
  return room.celsius === null ? `${limit}.` : `${formats.temperature(room.celsius)}, ${limit}.`;
}

function since(room: RoomNow, formats: RoomFormats, now: number): string {
  return room.since === null ? '' : ` since ${formats.timeSeenFrom(room.since, now)}`;
}

/** "3 racks, 214 vessels." */
function stock({ racks, batches }: RoomFacts): string {
  const vessels = batches.reduce((sum, batch) => sum + batch.vessels, 0);
  const standing = vessels === 0 ? 'nothing curing' : `${vessels} ${vessels === 1 ? 'vessel' : 'vessels'}`;
  return `${racks} ${racks === 1 ? 'rack' : 'racks'}, ${standing}.`;
}

/** "3 soy batches"; without the wax where several families, or none that may be seen, are concerned. */
function batchesOf(batches: readonly BatchCard[]): string {
  const trades = new Set(batches.map((batch) => tradeName(batch.waxFamily)));
  const trade = trades.size === 1 ? [...trades][0] : '';
  return `${batches.length} ${trade ? `${trade} ` : ''}${batches.length === 1 ? 'batch' : 'batches'}`;
}

/** A wax family as a maker says it: "soy-container" → "soy"; '' when it may not be seen. */
export function tradeName(family: string | null): string {
  return family === null ? '' : family.replace(/-(container|pillar)$/, '');
}

/** "L-118, L-121 and L-122"; more than four are counted. */
export function codes(batches: readonly { readonly code: string }[]): string {
  return list(batches.map((batch) => batch.code));
}

function joined(sentences: readonly string[]): string {
  return sentences.filter((sentence) => sentence !== '').join(' ');
}

function capital(sentence: string): string {
  return sentence.charAt(0).toUpperCase() + sentence.slice(1);
}
