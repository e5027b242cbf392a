import type { Alert, AlertFacts } from '#shared/contract/alerts';
import type { StateWords } from '#shared/words/room-state';
import type { StudioFormats } from '../../core/time/studio-formats';

/**
 * An alert in one line: where and what in bold, then since when, the figure and its limit.
 * @param now epoch ms
 */
export function alertLine(alert: Alert, formats: StudioFormats, now: number): StateWords {
  const { facts } = alert;
  const place = [facts.studioName, facts.roomName].filter((name) => name !== null).join(', ');
  const over = alert.state === 'returned' ? 'over, but not acknowledged; ' : '';
  return { lead: `${place}: ${matter(facts)}`, rest: `${over}${figures(facts, formats, now)}` };
}

function matter(facts: AlertFacts): string {
  switch (facts.kind) {
    case 'too-warm':
      return `too warm${concerned(facts)}`;
    case 'too-cold':
      return `too cold${concerned(facts)}`;
    case 'too-damp':
      return 'too damp';
    case 'condensation':
      return 'wax close to the dew point';
    case 'swinging':
      return 'temperature swings';
    case 'silent':
      return facts.sensorName === null ? 'silent' : `sensor ${facts.sensorName} is silent`;
    case 'stuck':
      return facts.sensorName === null ? 'a sensor is stuck' : `sensor ${facts.sensorName} is stuck`;
    case 'battery':
      return facts.sensorName === null ? 'a battery is low' : `battery of ${facts.sensorName} is low`;
    case 'intake-silent':
      return 'no sensor is heard';
  }
}

function concerned({ batches }: AlertFacts): string {
  if (batches.length === 0) return '';
  const trades = new Set(batches.map((batch) => batch.waxFamily.replace(/-(container|pillar)$/, '')));
  const trade = trades.size === 1 ? `${[...trades][0] ?? ''} ` : '';
  return ` for ${batches.length} ${trade}${batches.length === 1 ? 'batch' : 'batches'}`;
}

function figures(facts: AlertFacts, formats: StudioFormats, now: number): string {
  const since = `since ${formats.timeSeenFrom(facts.since, now)}`;
  const limit = (write: (value: number) => string) =>
    facts.limit === null ? '' : `, limit ${write(facts.limit)}`;
  const value = (write: (value: number) => string) =>
    facts.value === null ? '' : `, now ${write(facts.value)}`;
  switch (facts.kind) {
    case 'too-warm':
    case 'too-cold':
      return `${since}${value(formats.temperature)}${limit(formats.temperatureFigure)}`;
    case 'too-damp':
      return `${since}${value(formats.humidity)}${limit(formats.humidity)}`;
    case 'condensation':
      return facts.dewPoint === null
        ? since
        : `${since}${value(formats.temperature)}, dew point ${formats.temperature(facts.dewPoint)}`;
    case 'swinging':
      return `${since}${value(formats.difference)}${limit(formats.difference)} a day`;
    case 'battery':
      return facts.value === null ? since : `${since}, ${facts.value.toFixed(0)} % left`;
    case 'silent':
    case 'stuck':
    case 'intake-silent':
      return facts.lastHeardAt === null
        ? since
        : `last heard ${formats.timeSeenFrom(facts.lastHeardAt, now)}, ${formats.duration(now - Date.parse(facts.lastHeardAt))} ago`;
  }
}
