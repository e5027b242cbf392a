import { randomUUID } from 'node:crypto';
import type { AlertFacts } from '#shared/contract/alerts';
import { alertPlace, alertSentence, alertWords, clearedSentence } from '#shared/words/alert-words';
import { studioFormats } from '../../mail/studio-formats.js';
import type { AlertRecord, AlertStudio, Write } from './alert-records.js';
import { quietUntil } from './quiet-hours.js';

/** Something to tell about one alert. */
export interface News {
  readonly alert: Pick<AlertRecord, 'id' | 'severity' | 'facts' | 'escalation' | 'version'>;
  readonly what: 'raised' | 'worse' | 'cleared' | 'escalated';
}

export interface DeliveriesParts {
  /** Address people type; links in mails start with it. */
  readonly publicUrl: string;
  /** Alert mails each person got in the last hour. */
  readonly mailsSince: (personIds: readonly string[], since: number) => Promise<ReadonlyMap<string, number>>;
  /** The system's time: mails go out in it, however fast the domain's clock runs. */
  readonly systemNow: () => number;
}

type Person = AlertStudio['chain'][number];

const HOUR_MS = 3_600_000;
/** More alert mails an hour than this become a digest; critical ones always go out. Common practice, no source. */
const MAILS_AN_HOUR = 12;

/** Who is told what, and how: one mail a person for everything that happens together in a studio. */
export class Deliveries {
  constructor(private readonly parts: DeliveriesParts) {}

  /** Until when a new alert is held back, epoch ms; null: it goes out now. What is critical is never held back. */
  heldUntil(studio: AlertStudio, severity: AlertRecord['severity'], at: number): number | null {
    if (severity === 'critical') return null;
    return quietUntil(at, { timeZone: studio.timeZone, from: studio.quietFrom, to: studio.quietTo });
  }

  /** Mails to one person about things that happened together. */
  async mails(studio: AlertStudio, person: Person, news: readonly News[], now: number): Promise<Write[]> {
    const [first] = news;
    if (first === undefined) return [];
    const systemNow = this.parts.systemNow();
    const sent = (await this.parts.mailsSince([person.id], systemNow - HOUR_MS)).get(person.id) ?? 0;
    const digest = sent >= MAILS_AN_HOUR && news.every(({ alert }) => alert.severity !== 'critical');
    const hour = Math.ceil(systemNow / HOUR_MS) * HOUR_MS;
    const body = news.map((one) => this.#paragraph(studio, one, now)).join('\n\n');
    return [
      {
        do: digest ? 'digest' : 'mail',
        mail: {
          messageId: digest
            ? `<digest-${hour / HOUR_MS}-${person.id}@stillroom>`
            : `<alert-${first.alert.id}-${first.what}-${first.alert.version}-${person.id}@stillroom>`,
          recipient: person.email,
          subject: digest ? 'Stillroom: alerts of this hour' : this.#subject(studio, news, now),
          body: digest ? body : `${body}\n\n${this.#footer(studio, person)}`,
          alertId: first.alert.id,
          personId: person.id,
          at: new Date(digest ? hour : systemNow),
        },
      },
    ];
  }

  /** Notices in the app for everybody who may see alerts of the studio. */
  notices(studio: AlertStudio, news: readonly News[], now: number): Extract<Write, { do: 'notice' }>[] {
    return news.flatMap(({ alert, what }) =>
      studio.watchers.map((personId) => ({
        do: 'notice' as const,
        id: randomUUID(),
        personId,
        studioId: studio.id,
        alertId: alert.id,
        at: now,
        text: `${alertPlace(alert.facts)}: ${this.#sentence(studio, alert.facts, what, now)}`,
      })),
    );
  }

  #subject(studio: AlertStudio, news: readonly News[], now: number): string {
    const [first] = news;
    if (first === undefined) return '';
    if (news.length > 1) return `${studio.name}: ${news.length} alerts`;
    const place = alertPlace(first.alert.facts);
    if (first.what === 'cleared') return `Over: ${place}`;
    const { headline } = alertWords(first.alert.facts, studioFormats(studio.unit, studio.timeZone), now);
    return `${first.what === 'escalated' ? 'Still open: ' : ''}${place}: ${headline}`;
  }

  #sentence(studio: AlertStudio, facts: AlertFacts, what: News['what'], now: number): string {
    const formats = studioFormats(studio.unit, studio.timeZone);
    return what === 'cleared' ? clearedSentence(facts, formats, now) : alertSentence(facts, formats, now);
  }

  #paragraph(studio: AlertStudio, { alert, what }: News, now: number): string {
    const { facts } = alert;
    const lines = [alertPlace(facts), this.#sentence(studio, facts, what, now)];
    if (what !== 'cleared') {
      if (facts.batches.length > 0) {
        lines.push(`Batches: ${facts.batches.map(({ code, shelf }) => `${code} (${shelf})`).join(', ')}`);
      }
      lines.push(alertWords(facts, studioFormats(studio.unit, studio.timeZone), now).act);
    }
    lines.push(`${this.parts.publicUrl}/alerts/${alert.id}?studio=${studio.id}`);
    return lines.join('\n');
  }

  #footer(studio: AlertStudio, person: Person): string {
    const minutes = Math.round(studio.escalateAfterMs / 60_000);
    const index = studio.chain.findIndex(({ id }) => id === person.id);
    const next = studio.chain[index + 1];
    const chain = next
      ? `Without an acknowledgement ${next.name} is told after ${minutes} min.`
      : 'You are the last who is told.';
    return `${chain} Times are ${studio.name}'s own (${studio.timeZone}).`;
  }
}
