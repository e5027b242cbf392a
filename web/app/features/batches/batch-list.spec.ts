import { describe, expect, it } from 'vitest';
import { aBatch, aGate, REACHED } from '#shared/words/test-floor';
import { studioFormats } from '../../core/time/studio-formats';
import { batchLine, type Column, sortedBatches, withLive } from './batch-list';

const NOW = Date.parse('2026-05-04T15:00:00Z');
const formats = studioFormats('Europe/Lisbon', 'C');
const placeOf = () => 'Loft, Rack 1';
const order = (batches: ReturnType<typeof aBatch>[], by: Column, direction: 'ascending' | 'descending') =>
  sortedBatches(batches, { by, direction }, placeOf).map(({ code }) => code);

describe('the list of batches', () => {
  it('writes a batch column by column', () => {
    const { texts } = batchLine(aBatch(1), formats, placeOf, NOW);
    expect(texts).toEqual({
      ...{ code: 'L-101', design: 'Fig Leaf', wax: 'soy', poured: 'Fri 24 Apr', vessels: '24' },
      ...{ place: 'Loft, Rack 1', hardening: '61 %', cureAge: '9.3 d' },
      ...{ next: 'wick test Fri 8 May', frosting: '14' },
    });
    const ended = aBatch(2, { status: 'dispatched', rackId: null, hardening: null, frosting: null });
    expect(batchLine(ended, formats, placeOf, NOW).texts).toMatchObject({
      ...{ place: '', hardening: '–', next: 'dispatched', frosting: '' },
    });
    expect(batchLine(aBatch(3, { rackId: null }), formats, placeOf, NOW).texts.place).toBe('no shelf');
  });

  it('sorts codes as people count and gates by their date', () => {
    const [ninth, tenth] = [aBatch(1, { code: 'L-9' }), aBatch(2, { code: 'L-10' })];
    expect(order([tenth, ninth], 'code', 'ascending')).toEqual(['L-9', 'L-10']);
    const ready = aBatch(3, { wickTest: aGate(REACHED), ship: aGate(REACHED) });
    const undated = aBatch(4, { wickTest: aGate({ t50: null }) });
    const tested = aBatch(5, { wickTest: aGate(REACHED) });
    expect(order([undated, tested, aBatch(6), ready], 'next', 'ascending')).toEqual([
      'L-103',
      'L-106',
      'L-105',
      'L-104',
    ]);
  });

  it('puts what is not known last when the largest comes first, and equal ones newest first', () => {
    const unknown = aBatch(1, { hardening: null });
    const hard = aBatch(2, { hardening: 0.9 });
    expect(order([unknown, hard], 'hardening', 'descending')).toEqual(['L-102', 'L-101']);
    const newer = aBatch(3, { pouredAt: '2026-05-01T11:00:00.000Z' });
    expect(order([aBatch(4), newer], 'vessels', 'ascending')).toEqual(['L-103', 'L-104']);
  });

  it('lays what is live over what was loaded', () => {
    const loaded = [aBatch(1), aBatch(2, { status: 'dispatched' })];
    const live = [aBatch(1, { hardening: 0.7 }), aBatch(9)];
    expect(withLive(loaded, live).map(({ code, hardening }) => [code, hardening])).toEqual([
      ['L-101', 0.7],
      ['L-102', 0.61],
    ]);
  });
});
