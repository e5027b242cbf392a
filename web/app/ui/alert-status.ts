import type { AlertKind } from '#shared/contract/alerts';
import type { Status } from './status-mark';

/** The shape an alert is marked with. */
export const ALERT_STATUS: Readonly<Record<AlertKind, Status>> = {
  'too-warm': 'heat',
  'too-cold': 'cold',
  'too-damp': 'damp',
  condensation: 'damp',
  swinging: 'swinging',
  silent: 'silent',
  stuck: 'silent',
  battery: 'notice',
  'intake-silent': 'silent',
};
