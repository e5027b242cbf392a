import type { AlertStep } from '#shared/contract/alerts';

/** The steps of an alert's life in words. */
export const STEP_WORDS: Readonly<Record<AlertStep['what'], string>> = {
  raised: 'Raised',
  worse: 'Got worse',
  acknowledged: 'Acknowledged',
  shelved: 'Shelved',
  unshelved: 'Taken off the shelf',
  'handed-over': 'Handed over',
  mailed: 'Mail sent',
  'mail-failed': 'Mail could not be sent',
  escalated: 'Told the next one',
  'held-quiet': 'Held back',
  returned: 'Over',
  cleared: 'Over',
};
