import { beforeEach, describe, expect, it } from 'vitest';
import { FrameCollector } from './frame-collector.js';
import { TestSource } from './test-source.js';

const clock = { now: () => Date.parse('2026-05-04T12:00:07Z'), speed: () => 1 };
const both = ['staff', 'viewers'] as const;

describe('FrameCollector', () => {
  let source: TestSource;
  let collector: FrameCollector;
  beforeEach(() => {
    source = new TestSource();
    collector = new FrameCollector(source, clock);
  });

  it('makes one frame of many changes and none of none', async () => {
    for (let reading = 0; reading < 50; reading++) collector.roomChanged('north', `room ${reading % 3}`);
    const [staff] = await collector.frames('north', ['staff']);
    expect(staff?.frame.rooms.map(({ roomId }) => roomId)).toEqual(['room 0', 'room 1', 'room 2']);
    expect(staff?.frame.at).toBe('2026-05-04T12:00:07.000Z');
    expect(await collector.frames('north', ['staff'])).toEqual([]);
    expect(source.asked).toBe(1);
  });

  it('counts the frames of each audience by itself, without holes', async () => {
    collector.alertChanged('north', 'a1');
    expect(
      (await collector.frames('north', both)).map(({ audience, frame }) => [audience, frame.seq]),
    ).toEqual([['staff', 1]]);
    collector.roomChanged('north', 'room 0');
    expect(
      (await collector.frames('north', both)).map(({ audience, frame }) => [audience, frame.seq]),
    ).toEqual([
      ['staff', 2],
      ['viewers', 1],
    ]);
    expect([collector.seq('north', 'staff'), collector.seq('north', 'viewers')]).toEqual([2, 1]);
    expect(collector.seq('south', 'staff')).toBe(0);
  });

  it('gives viewers neither alerts nor recipes, but the room an alert is about', async () => {
    source.curing.add('b1');
    source.alertRooms.set('a1', 'cellar');
    collector.batchesChanged('north', ['b1', 'b2']);
    collector.alertChanged('north', 'a1');
    const [staff, viewers] = await collector.frames('north', both);
    expect(staff?.frame.alerts.map(({ id }) => id)).toEqual(['a1']);
    expect(staff?.frame.batches[0]?.designName).toContain('Harvest');
    expect(viewers?.frame.alerts).toEqual([]);
    expect(viewers?.frame.batches[0]).toMatchObject({ id: 'b1', designName: null, waxFamily: null });
    expect(viewers?.frame.goneBatches).toEqual(['b2']);
    expect(viewers?.frame.rooms.map(({ roomId }) => roomId)).toEqual(['cellar']);
  });

  it('keeps everything due when the source fails', async () => {
    collector.ribbonChanged('north', 'room 0', 40);
    collector.batchesChanged('north', ['b1']);
    source.fails = true;
    await expect(collector.frames('north', both)).rejects.toThrow('the source fails');
    source.fails = false;
    collector.ribbonChanged('north', 'room 0', 50);
    const [staff] = await collector.frames('north', ['staff']);
    expect(staff?.frame.seq).toBe(1);
    expect(staff?.frame.ribbons[0]?.ribbon.from).toBe(new Date(40 * 600_000).toISOString());
    expect(staff?.frame.goneBatches).toEqual(['b1']);
  });

  it('notices a room that reads otherwise though nothing told', async () => {
    source.celsius.set('cellar', 21);
    collector.roomChanged('north', 'cellar');
    await collector.frames('north', ['staff']);
    await collector.lookOver('north', ['cellar']);
    expect(await collector.frames('north', ['staff'])).toEqual([]);
    source.celsius.set('cellar', 22.5);
    await collector.lookOver('north', ['cellar']);
    const [staff] = await collector.frames('north', ['staff']);
    expect(staff?.frame.rooms[0]?.celsius).toBe(22.5);
  });

  it('forgets what changed where nobody looks', async () => {
    collector.roomChanged('north', 'cellar');
    collector.forget('north');
    expect(await collector.frames('north', ['staff'])).toEqual([]);
  });
});
