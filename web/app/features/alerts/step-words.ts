import type { AlertFacts, AlertStep } from '#shared/contract/alerts';
import { valueInWords } from '#shared/words/alert-words';
import type { StudioFormats } from '../../core/time/studio-formats';

const STEP_WORDS: Readonly<Record<AlertStep['what'], string>> = {
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

/** Kinds whose steps carry a figure that says something. */
const MEASURED: ReadonlySet<AlertFacts['kind']> = new Set([
  'too-warm',
  'too-cold',
  'too-damp',
  'condensation',
  'swinging',
  'battery',
]);

/** A step of an alert's life: "Got worse: 26.4 °C", "Acknowledged". */
export function stepWords(
  step: Pick<AlertStep, 'what' | 'value'>,
  facts: AlertFacts,
  formats: StudioFormats,
): string {
  const what = STEP_WORDS[step.what];
  return step.value === null || !MEASURED.has(facts.kind)
    ? what
    : `${what}: ${valueInWords(facts, step.value, formats)}`;
}
