import { aBatch, aGate, aRack, REACHED } from '#shared/words/test-floor';
import { wallLayout } from './wall-layout';

const NOW = Date.parse('2026-05-04T10:00:00.000Z');
const words = () => ({ what: 'test', when: 'Fri 8 May', label: 'a batch' });
const rack = aRack(1);
const [top, bottom] = rack.shelves.map((shelf) => shelf.id);

describe('the layout of a wall', () => {
  it('puts racks side by side by position and shelves from the top', () => {
    const turned = { ...aRack(2), shelves: [...aRack(2).shelves].reverse() };
    const wall = wallLayout([turned, rack], [], words, NOW);
    expect(wall.map((one) => one.name)).toEqual(['Rack 1', 'Rack 2']);
    expect(wall[1]?.shelves.map((shelf) => shelf.position)).toEqual([1, 2]);
  });

  it('orders racks of the same position by number, not by letter', () => {
    const racks = [
      aRack(1, 1, { position: 0, name: 'Rack 10' }),
      aRack(2, 1, { position: 0, name: 'Rack 9' }),
    ];
    expect(wallLayout(racks, [], words, NOW).map((one) => one.name)).toEqual(['Rack 9', 'Rack 10']);
  });

  it('draws each batch where it stands, the oldest first, as wide as its share of the shelf', () => {
    const older = aBatch(1, { vessels: 9, shelfId: top, pouredAt: '2026-04-20T08:00:00.000Z' });
    const younger = aBatch(2, { vessels: 18, shelfId: top });
    const elsewhere = aBatch(3, { shelfId: bottom });
    const unplaced = aBatch(4, { shelfId: null });
    const [one] = wallLayout([rack], [younger, elsewhere, unplaced, older], words, NOW);
    expect(one?.shelves[0]?.blocks.map((block) => [block.code, block.share])).toEqual([
      ['L-101', 0.25],
      ['L-102', 0.5],
    ]);
    expect(one?.shelves[1]?.blocks.map((block) => block.code)).toEqual(['L-103']);
  });

  it('shares an overfull shelf among its batches', () => {
    const batches = [aBatch(1, { vessels: 40, shelfId: top }), aBatch(2, { vessels: 40, shelfId: top })];
    const blocks = wallLayout([rack], batches, words, NOW)[0]?.shelves[0]?.blocks ?? [];
    expect(blocks.map((block) => block.share)).toEqual([0.5, 0.5]);
  });

  it('keeps a tiny batch wide enough to be seen', () => {
    const [one] = wallLayout([rack], [aBatch(1, { vessels: 1, shelfId: top })], words, NOW);
    expect(one?.shelves[0]?.blocks[0]?.share).toBe(0.12);
  });

  it('marks how far a batch has come to its ship gate and where the next gate stands', () => {
    const poured = '2026-05-01T10:00:00.000Z';
    const wickTest = aGate({ t50: '2026-05-07T10:00:00.000Z' });
    const ship = aGate({ t50: '2026-05-13T10:00:00.000Z' });
    const block = (over: object) =>
      wallLayout(
        [rack],
        [aBatch(1, { shelfId: top, pouredAt: poured, wickTest, ship, ...over })],
        words,
        NOW,
      )[0]?.shelves[0]?.blocks[0];
    expect(block({})).toMatchObject({ passed: 0.25, gateAt: 0.5, ready: false });
    expect(block({ wickTest: aGate(REACHED) })).toMatchObject({ passed: 0.25, gateAt: 1 });
    expect(block({ wickTest: aGate(REACHED), ship: aGate(REACHED) })).toMatchObject({
      passed: 1,
      gateAt: null,
      ready: true,
    });
    expect(block({ wickTest: aGate({ t50: null }), ship: aGate({ t50: null }) })).toMatchObject({
      passed: 0,
      gateAt: null,
    });
  });
});
