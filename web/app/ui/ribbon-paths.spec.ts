import { ribbonPaths } from './ribbon-paths';

const band = { low: 18, high: 24 };
const size = { width: 100, height: 50 };

describe('a temperature ribbon', () => {
  it('scales the band and two kelvin around it', () => {
    const paths = ribbonPaths([20, 21], band, size, 2);
    expect(paths.bandTop).toBe(10);
    expect(paths.bandBottom).toBe(40);
    expect(paths.line).toBe('M0 30L100 25');
    expect([paths.hot, paths.cold]).toEqual(['', '']);
  });

  it('makes room for what went beyond and fills it', () => {
    const paths = ribbonPaths([21, 30, 21], band, size, 3);
    expect(paths.bandTop).toBe(21.4);
    expect(paths.hot).toBe('M0 21.4L0 21.4L50 0L100 21.4L100 21.4Z');
    expect(ribbonPaths([12, 12], band, size, 2).cold).not.toBe('');
  });

  it('breaks the line at a gap and marks the gap', () => {
    const paths = ribbonPaths([20, null, null, 20, 20], band, size, 5);
    expect(paths.line.match(/M/g)).toHaveLength(2);
    expect(paths.gaps).toEqual([{ x: 0, width: 75 }]);
  });

  it('ends at now when it holds less than 24 hours', () => {
    expect(ribbonPaths([20, 20], band, size, 5).line).toBe('M75 30L100 30');
  });

  it('draws an empty day as one gap', () => {
    const paths = ribbonPaths([null, null, null], band, size, 3);
    expect(paths.line).toBe('');
    expect(paths.gaps).toEqual([{ x: 0, width: 100 }]);
  });
});
