import type { AlertKind } from '#shared/contract/alerts';
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
    about: 'The coldest the room was in three hours lies within 1 K of the dew point.',
  },
  swinging: { name: 'Swinging', about: 'The range of 24 hours is larger than the room’s calm swing.' },
  silent: { name: 'Sensor silent', about: 'Nothing heard for three of its intervals, 15 minutes at least.' },
  stuck: { name: 'Sensor stuck', about: 'One and the same value for six hours.' },
  battery: { name: 'Battery low', about: 'Less than 15 %.' },
  'intake-silent': { name: 'All sensors silent', about: 'Nothing heard from any sensor of the studio.' },
};

/** How far back the value has to come before the alert can end: "0.5 °C inside the limit". */
export function clearByInWords(kind: AlertKind, value: number, formats: StudioFormats): string {
  switch (kind) {
    case 'too-damp':
      return `${value} % inside the limit`;
    case 'battery':
      return `${value} % above the limit`;
    case 'silent':
    case 'stuck':
    case 'intake-silent':
      return '';
    case 'too-warm':
    case 'too-cold':
    case 'condensation':
    case 'swinging':
      return `${formats.difference(value)} inside the limit`;
  }
}
