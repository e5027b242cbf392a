import type {
  AlertChanged,
  BatchesChanged,
  CellsChanged,
  CommittedReading,
  LayoutChanged,
  NoticeWritten,
  PersonChanged,
} from './announcements.js';
import { Feed } from './feed.js';

/** Every announcement the parts of the gateway make to each other. */
export interface Feeds {
  readonly readings: Feed<readonly CommittedReading[]>;
  readonly cells: Feed<CellsChanged>;
  readonly layout: Feed<LayoutChanged>;
  readonly batches: Feed<BatchesChanged>;
  readonly alerts: Feed<AlertChanged>;
  /** Somebody changed an alert or the alert rules of a room. */
  readonly rules: Feed<LayoutChanged>;
  readonly people: Feed<PersonChanged>;
  readonly notices: Feed<NoticeWritten>;
}

/** @param failed told when a listener throws; the others are told all the same */
export function createFeeds(failed: (error: unknown) => void): Feeds {
  return {
    readings: new Feed(failed),
    cells: new Feed(failed),
    layout: new Feed(failed),
    batches: new Feed(failed),
    alerts: new Feed(failed),
    rules: new Feed(failed),
    people: new Feed(failed),
    notices: new Feed(failed),
  };
}
