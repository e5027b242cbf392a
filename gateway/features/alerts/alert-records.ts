import type { AlertFacts, AlertKind, AlertStep, Rule, Severity } from '#shared/contract/alerts';
import type { RoomLimits } from '#shared/contract/rooms';
import type { MailToSend } from '../../mail/enqueue-mail.js';
import type { RuleState } from './rule-machine.js';

/** An alert as it is kept. */
export interface AlertRecord {
  readonly id: string;
  readonly studioId: string;
  readonly roomId: string | null;
  readonly sensorId: string | null;
  readonly kind: AlertKind;
  readonly severity: Severity;
  readonly state: 'open' | 'acknowledged' | 'returned' | 'cleared';
  readonly facts: AlertFacts;
  readonly raisedAt: number;
  readonly clearedAt: number | null;
  readonly acknowledgedBy: string | null;
  readonly acknowledgedAt: number | null;
  readonly acknowledgeNote: string | null;
  readonly shelvedBy: string | null;
  readonly shelvedUntil: number | null;
  readonly shelveReason: string | null;
  readonly holder: string | null;
  /** Last person of the chain who was told; −1: nobody yet, held back by quiet hours. */
  readonly escalation: number;
  readonly nextEscalationAt: number | null;
  readonly version: number;
}

/** What of an alert may change after it was raised. */
export type AlertChange = Partial<
  Omit<AlertRecord, 'id' | 'studioId' | 'roomId' | 'sensorId' | 'kind' | 'raisedAt' | 'version'>
>;

/** State of a rule together with the alert it raised. */
export interface KeptRule {
  readonly state: RuleState;
  readonly alertId: string | null;
}

/** One write of a transition; all writes of a transition go into one transaction. */
export type Write =
  | { readonly do: 'raise'; readonly alert: AlertRecord }
  | { readonly do: 'change'; readonly alertId: string; readonly set: AlertChange }
  | {
      readonly do: 'step';
      readonly alertId: string;
      readonly at: number;
      readonly what: AlertStep['what'];
      readonly who: string | null;
      readonly note: string;
      readonly value: number | null;
    }
  | { readonly do: 'keep'; readonly key: string; readonly rule: KeptRule; readonly at: number }
  | { readonly do: 'mail'; readonly mail: MailToSend }
  /** Added to the recipient's digest of the hour instead of a mail of its own. */
  | { readonly do: 'digest'; readonly mail: MailToSend }
  | {
      readonly do: 'notice';
      readonly id: string;
      readonly personId: string;
      readonly studioId: string;
      readonly alertId: string | null;
      readonly at: number;
      readonly text: string;
    };

/** A room with its limits and rules. */
export interface RuledRoom {
  readonly id: string;
  readonly studioId: string;
  readonly name: string;
  readonly limits: RoomLimits;
  readonly rules: readonly Rule[];
}

/** A sensor in service. */
export interface RuledSensor {
  readonly id: string;
  readonly no: number;
  readonly studioId: string;
  readonly roomId: string;
  readonly name: string;
  readonly intervalSeconds: number;
  readonly battery: number | null;
}

/** A studio as alerts need it. */
export interface AlertStudio {
  readonly id: string;
  readonly name: string;
  readonly timeZone: string;
  readonly unit: 'C' | 'F';
  readonly quietFrom: number | null;
  readonly quietTo: number | null;
  readonly escalateAfterMs: number;
  /** Who is told, one after the other: the recipients, or without any the leads; the owners last. */
  readonly chain: readonly { readonly id: string; readonly name: string; readonly email: string }[];
  /** Everybody who may see alerts here: gets the notice in the app. */
  readonly watchers: readonly string[];
}
