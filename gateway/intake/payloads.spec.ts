import { describe, expect, it } from 'vitest';
import { parsePayload } from './payloads.js';

const NOW = Date.parse('2026-05-04T12:00:00Z');
const parse = (value: unknown) =>
  parsePayload(new TextEncoder().encode(typeof value === 'string' ? value : JSON.stringify(value)), NOW);

describe('plain readings', () => {
  it('takes one, with ISO time, humidity and battery', () => {
    expect(parse({ t: 21.4, rh: 48.2, at: '2026-05-01T12:00:00+02:00', bat: 81 })).toEqual({
      faults: [],
      readings: [
        {
          celsius: 21.4,
          humidity: 48.2,
          battery: 81,
          at: Date.parse('2026-05-01T10:00:00Z'),
          sequence: null,
        },
      ],
    });
  });

  it('takes an array, epoch seconds, and readings without a clock', () => {
    const { readings, faults } = parse([
      { t: 20, at: 1_777_629_600.5 },
      { t: 20.1, boot: 3, seq: 17 },
      { t: 20.2, extra: 'ignored' },
    ]);
    expect(faults).toEqual([]);
    expect(readings.map(({ at }) => at)).toEqual([1_777_629_600_500, null, null]);
    expect(readings[1]?.sequence).toEqual({ boot: 3, seq: 17 });
  });

  it('keeps the good readings of an array and names the bad ones', () => {
    const { readings, faults } = parse([
      { t: 20 },
      { t: 95 },
      { t: 21, rh: 101 },
      { t: 21, at: 1_777_629_600_000 },
    ]);
    expect(readings).toHaveLength(1);
    expect(faults).toHaveLength(3);
    expect(faults.join(' ')).toMatch(/95 °C.*101 %.*milliseconds/);
  });

  it.each([
    ['not JSON', '{"t": 21', /not valid JSON/],
    ['not UTF-8', null, /not valid JSON/],
    ['a number', '21.4', /neither a reading/],
    ['text for a temperature', '{"t": "21.4"}', /neither a reading/],
    ['a local time without zone', '{"t": 21, "at": "2026-05-01T10:00:00"}', /neither a reading/],
    ['an empty array', '[]', /neither a reading/],
  ])('refuses %s', (_what, payload, why) => {
    const { readings, faults } =
      payload === null ? parsePayload(new Uint8Array([0xff, 0xfe, 0x7b]), NOW) : parse(payload);
    expect(readings).toEqual([]);
    expect(faults[0]).toMatch(why);
  });

  it('refuses a huge message', () => {
    expect(parse(' '.repeat(70_000)).faults[0]).toMatch(/bytes/);
  });
});

describe('SenML (RFC 8428)', () => {
  it('resolves base name, time, unit and value (after the RFC’s example in §5.1.3)', () => {
    const { readings, faults } = parse([
      {
        bn: 'urn:dev:mac:0024befffe804ff1/',
        bt: 1_276_020_076,
        bu: 'Cel',
        bver: 10,
        n: 'temp',
        u: 'Cel',
        v: 23.5,
      },
      { n: 'temp', t: 60, v: 23.6 },
      { n: 'rh', u: '%RH', t: 60, v: 41.5 },
    ]);
    expect(faults).toEqual([]);
    expect(readings).toEqual([
      { celsius: 23.5, humidity: null, battery: null, at: 1_276_020_076_000, sequence: null },
      { celsius: 23.6, humidity: 41.5, battery: null, at: 1_276_020_136_000, sequence: null },
    ]);
  });

  it('takes times below 2^28 as relative to now, and adds the base value (§4.5.3, §4.6)', () => {
    const { readings } = parse([
      { bv: 20, bu: 'Cel', v: 1.5, t: -120 },
      { v: 2, t: 0 },
    ]);
    expect(readings.map(({ celsius, at }) => [celsius, at! - NOW])).toEqual([
      [21.5, -120_000],
      [22, 0],
    ]);
  });

  it('takes kelvin and battery, and a pack without any time as read now', () => {
    const { readings } = parse([
      { n: 'a', u: 'K', v: 294.15 },
      { n: 'b', u: '%EL', v: 64 },
    ]);
    expect(readings).toEqual([{ celsius: 21, humidity: null, battery: 64, at: null, sequence: null }]);
  });

  it.each([
    [[{ n: 'a', u: 'Cel', v: 20, bver: 11 }], /version 11/],
    [[{ n: 'a', u: 'Cel', v: 20, must_: 1 }], /must be understood/],
    [[{ n: 'a', u: 'Cel', s: 20 }], /sum/],
    [[{ n: 'a', u: 'Cel', vs: 'warm' }], /number/],
    [[{ n: 'a', v: 20 }], /without a unit/],
    [[{ n: 'a', u: 'Pa', v: 20 }], /unit Pa/],
    [[{ n: 'a', u: '%RH', v: 20 }], /without a temperature/],
    [[{ n: 'a', u: 'Cel', v: 'x' }], /well formed/],
  ])('refuses %j', (pack, why) => {
    const { readings, faults } = parse(pack);
    expect(readings).toEqual([]);
    expect(faults.join(' ')).toMatch(why);
  });
});
