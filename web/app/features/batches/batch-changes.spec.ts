import { describe, expect, it } from 'vitest';
import type { BatchPage, Stay } from '#shared/contract/batches';
import { aBatch } from '#shared/words/test-floor';
import { changesInWords } from './batch-changes';

const stay = (roomName: string, to: string | null): Stay => ({
  ...{ id: roomName, shelfId: 'sh', roomId: 'r', roomName, rackName: 'Rack 2', shelfPosition: 3 },
  ...{ from: '2026-05-01T10:00:00.000Z', to },
});
const page = (change: Partial<BatchPage>): BatchPage => ({
  ...{ card: aBatch(1), recipe: null, notes: '', stays: [stay('Loft', null)], estimate: null },
  ...{ shifts: [], verdicts: [] },
  ...change,
});

describe('what somebody else did meanwhile', () => {
  it('says where it was moved', () => {
    const moved = page({ stays: [stay('Loft', '2026-05-04T10:00:00.000Z'), stay('Cellar', null)] });
    expect(changesInWords(page({}), moved)).toBe(
      'Somebody else changed this batch meanwhile: it was moved from Loft, Rack 2, shelf 3 to Cellar, Rack 2, shelf 3.',
    );
    expect(changesInWords(page({ stays: [] }), page({}))).toMatch(
      /it was placed on Loft, Rack 2, shelf 3\.$/,
    );
  });

  it('says that it has left', () => {
    const gone = page({
      card: aBatch(1, { status: 'dispatched' }),
      stays: [stay('Loft', '2026-05-04T10:00:00.000Z')],
    });
    expect(changesInWords(page({}), gone)).toMatch(/: it was dispatched\.$/);
  });

  it('says so even where nothing can be named', () => {
    expect(changesInWords(page({}), page({}))).toBe('Somebody else changed this batch meanwhile.');
  });
});
