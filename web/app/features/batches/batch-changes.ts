import type { BatchPage } from '#shared/contract/batches';
import { list } from '#shared/words/lists';

/** What somebody else did to a batch meanwhile, as a sentence. */
export function changesInWords(before: BatchPage, after: BatchPage): string {
  const changes: string[] = [];
  if (after.card.status !== before.card.status) changes.push(`it was ${after.card.status}`);
  const [was, is] = [placeOf(before), placeOf(after)];
  if (after.card.status === 'curing' && is !== was) {
    changes.push(was === '' ? `it was placed on ${is}` : `it was moved from ${was} to ${is || 'no shelf'}`);
  }
  const tests = after.verdicts.length - before.verdicts.length;
  if (tests > 0) changes.push('a wick test was signed');
  return changes.length === 0
    ? 'Somebody else changed this batch meanwhile.'
    : `Somebody else changed this batch meanwhile: ${list(changes)}.`;
}

/** "Loft, Rack 2, shelf 1", or '' while it stands nowhere. */
function placeOf(page: BatchPage): string {
  const stay = page.stays.find(({ to }) => to === null);
  return stay ? `${stay.roomName}, ${stay.rackName}, shelf ${stay.shelfPosition}` : '';
}
