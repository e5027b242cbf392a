import type { RoomSeries, SeriesPoint } from '#shared/contract/rooms';
import { studioFormats } from '../../core/time/studio-formats';
import { niceRange } from './room-chart-axes';
import { pointWords, withGaps } from './room-chart-options';

const point = (at: string, over: Partial<SeriesPoint> = {}): SeriesPoint => ({
  at,
  t: 20.5,
  tMin: 19.8,
  tMax: 21.4,
  rh: 52,
  rhMin: 50,
  rhMax: 55,
  dewPoint: 10.3,
  ...over,
});
const series = (points: SeriesPoint[], stepMinutes = 10): RoomSeries => ({
  stepMinutes,
  points,
  band: { low: 18, high: 24 },
  frostingLimits: [],
  marks: [],
});

describe('the chart of a room', () => {
  it('draws a gap where points are missing', () => {
    const points = [
      point('2026-05-04T10:00:00.000Z'),
      point('2026-05-04T10:10:00.000Z'),
      point('2026-05-04T11:00:00.000Z'),
    ];
    const drawn = withGaps(series(points));
    expect(drawn.map(({ t }) => t)).toEqual([20.5, 20.5, null, 20.5]);
    expect(drawn[2]?.at).toBe('2026-05-04T10:20:00.000Z');
  });

  it('leaves points that follow each other alone', () => {
    const points = [point('2026-05-04T10:00:00.000Z'), point('2026-05-04T11:00:00.000Z')];
    expect(withGaps(series(points, 60))).toEqual(points);
  });

  it('chooses round axes that hold every value', () => {
    expect(niceRange([17.2, 26.3], 5)).toEqual({ min: 16, max: 28, interval: 2 });
    expect(niceRange([46, 58], 2)).toEqual({ min: 40, max: 60, interval: 10 });
    expect(niceRange([20, 20], 5)).toEqual({ min: 20, max: 21, interval: 1 });
    expect(niceRange([-8, 31], 5)).toEqual({ min: -10, max: 40, interval: 10 });
  });

  it('tells a point in words, with its range only when it stands for more than ten minutes', () => {
    const formats = studioFormats('Europe/Lisbon', 'C');
    expect(pointWords(point('2026-05-04T10:00:00.000Z'), 60, formats)).toEqual([
      'Mon 4 May 11:00',
      '20.5\u00a0°C (19.8 to 21.4)',
      '52\u00a0% humidity (50 to 55)',
      'dew point 10.3\u00a0°C',
    ]);
    expect(pointWords(point('2026-05-04T10:00:00.000Z', { rh: null, dewPoint: null }), 10, formats)).toEqual([
      'Mon 4 May 11:00',
      '20.5\u00a0°C',
    ]);
    expect(
      pointWords(point('2026-05-04T10:00:00.000Z', { t: null, rh: null, dewPoint: null }), 10, formats),
    ).toEqual(['Mon 4 May 11:00', 'no reading']);
  });
});
