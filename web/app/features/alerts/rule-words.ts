import type { AlertKind } from '#shared/contract/alerts';
import type { RoomNow } from '#shared/contract/overview';
import type { RoomLimits } from '#shared/contract/rooms';
import type { StudioFormats } from '../../core/time/studio-formats';

/** What a rule is called and what it holds against what. */
export const RULE_WORDS: Readonly<Record<AlertKind, { readonly name: string; readonly about: string }>> = {
  'too-warm': {
    name: 'Too warm',
    about:
      'Above the frosting limit of the waxes that stand in the room, or the room’s own limit if that is lower.',
  },
  'too-cold': {
    name: 'Too cold to cure',
    about: 'Below the band, and dates would slip by more than the room allows should it stay so.',
  },
  'too-damp': { name: 'Too damp', about: 'Humidity above the room’s limit.' },
  condensation: {
    name: 'Close to condensation',
    about: 'The coldest the room was in three hours lies close to the dew point.',
  },
  swinging: { name: 'Swinging', about: 'The range of 24 hours is larger than the room’s calm swing.' },
  silent: { name: 'Sensor silent', about: 'Nothing heard for three of its intervals, 15 minutes at least.' },
  stuck: { name: 'Sensor stuck', about: 'One and the same value for six hours.' },
  battery: { name: 'Battery low', about: 'Less than 15 %.' },
  'intake-silent': { name: 'All sensors silent', about: 'Nothing heard from any sensor of the studio.' },
};

/** The limit a rule holds against in this room, as it is now; '' where it has none of its own. */
export function limitInWords(
  kind: AlertKind,
  limits: RoomLimits,
  now: Pick<RoomNow, 'heatLimit'>,
  formats: StudioFormats,
): string {
  switch (kind) {
    case 'too-warm':
      return now.heatLimit === null
        ? 'No limit now: nothing in the room frosts, and the room has no limit of its own.'
        : `Limit now: ${formats.temperature(now.heatLimit)}.`;
    case 'too-cold':
      return `Band from ${formats.temperature(limits.bandLow)}; told when dates slip by more than ${days(limits.slipDays)}.`;
    case 'too-damp':
      return `Limit: ${formats.humidity(limits.humidityHigh)}.`;
    case 'swinging':
      return `Calm swing: ${formats.difference(limits.swingLimit)}.`;
    case 'condensation':
      return `Limit: ${formats.difference(1)} above the dew point.`;
    case 'silent':
    case 'stuck':
    case 'battery':
    case 'intake-silent':
      return '';
  }
}

/** In which unit a rule's way back is measured; null where there is none. */
export function clearByUnit(kind: AlertKind): 'kelvin' | 'percent' | null {
  switch (kind) {
    case 'too-damp':
    case 'battery':
      return 'percent';
    case 'silent':
    case 'stuck':
    case 'intake-silent':
      return null;
    case 'too-warm':
    case 'too-cold':
    case 'condensation':
    case 'swinging':
      return 'kelvin';
  }
}

function days(count: number): string {
  return `${count} ${count === 1 ? 'day' : 'days'}`;
}
