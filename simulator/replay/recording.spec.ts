import { describe, expect, it } from 'vitest';
import { OptionsError, readOptions } from './options.js';
import { type RecordingFormat, readRecording } from './recording.js';

const format = (change: Partial<RecordingFormat> = {}): RecordingFormat => ({
  ...{ time: ['1'], zone: 'UTC', fahrenheit: false, dayFirst: false, decimalComma: false, delimiter: ',' },
  ...change,
});
const at = (iso: string) => Date.parse(iso);

describe('reading a recording', () => {
  it('rows with one field more than the header: a leading row number (Candanedo 2016, doi 10.24432/C5X01N, CC BY 4.0)', () => {
    const text = `"date","Temperature","Humidity","Light","CO2","HumidityRatio","Occupancy"
"140","2015-02-02 14:19:00",23.7,26.272,585.2,749.2,0.00476416302416414,1
"141","2015-02-02 14:19:59",23.718,26.29,578.4,760.4,0.00477266099212519,1
`;
    const { readings, faults } = readRecording(text, format({ time: ['date'] }), [
      { deviceId: 'office', temperature: 'Temperature', humidity: 'Humidity' },
    ]);
    expect(faults).toEqual([]);
    expect(readings).toEqual([
      { deviceId: 'office', at: at('2015-02-02T14:19:00Z'), celsius: 23.7, humidity: 26.272 },
      { deviceId: 'office', at: at('2015-02-02T14:19:59Z'), celsius: 23.718, humidity: 26.29 },
    ]);
  });

  it('a header that begins with #, spaces, day-first dates in two columns (SML2010, doi 10.24432/C5RS3S, CC BY 4.0)', () => {
    const text = `# 1:Date 2:Time 3:Temperature_Comedor_Sensor 4:Temperature_Habitacion_Sensor 8:Humedad_Comedor_Sensor
13/03/2012 11:45 18.1875 17.8275 39.9125
13/03/2012 12:00 18.4633 18.1207 39.9267
`;
    const { readings } = readRecording(text, format({ delimiter: ' ', time: ['1', '2'], dayFirst: true }), [
      { deviceId: 'dining', temperature: '3', humidity: 'Humedad_Comedor_Sensor' },
      { deviceId: 'bedroom', temperature: 'Temperature_Habitacion_Sensor', humidity: null },
    ]);
    expect(readings).toHaveLength(4);
    expect(readings[0]).toEqual({
      deviceId: 'dining',
      at: at('2012-03-13T11:45:00Z'),
      celsius: 18.1875,
      humidity: 39.9125,
    });
    expect(readings[1]).toMatchObject({ deviceId: 'bedroom', celsius: 17.8275, humidity: null });
  });

  it('several rooms at once, numbers in quotes padded with spaces (Candanedo 2017, doi 10.24432/C5VC8G, CC BY 4.0)', () => {
    const text = `"date","Appliances","T1","RH_1","T6","RH_6"
"2016-01-11 17:00:00","  60","19.890000000000001","47.596666666666700"," 7.026666666666669947","84.2566666666667032"
`;
    const { readings } = readRecording(text, format({ time: ['date'] }), [
      { deviceId: 'kitchen', temperature: 'T1', humidity: 'RH_1' },
      { deviceId: 'north', temperature: 'T6', humidity: 'RH_6' },
    ]);
    expect(readings.map(({ celsius }) => celsius)).toEqual([19.89, 7.02666666666667]);
  });

  it('°F, decimal commas, semicolons and a zone of its own', () => {
    const { readings } = readRecording(
      'when;t\n04.05.2026 12:00;77,5\n',
      format({
        delimiter: ';',
        decimalComma: true,
        fahrenheit: true,
        dayFirst: true,
        zone: 'Europe/Helsinki',
        time: ['when'],
      }),
      [{ deviceId: 'a', temperature: 't', humidity: null }],
    );
    expect(readings[0]?.at).toBe(at('2026-05-04T09:00:00Z'));
    expect(readings[0]?.celsius).toBeCloseTo(25.2777778, 6);
  });

  it('without a header columns are counted; epoch seconds are times; a zero is a value', () => {
    const { readings } = readRecording('1777894860,0,40\n1777894920,0.5,41\n', format(), [
      { deviceId: 'a', temperature: '2', humidity: '3' },
    ]);
    expect(readings.map(({ celsius }) => celsius)).toEqual([0, 0.5]);
    expect(readings[0]?.at).toBe(1_777_894_860_000);
  });

  it('names rows that cannot be read and goes on', () => {
    const { readings, faults } = readRecording(
      'time,t\n2026-05-04 12:00,20\nyesterday,21\n2026-05-04 12:10,warm\n',
      format({ time: ['time'] }),
      [{ deviceId: 'a', temperature: 't', humidity: null }],
    );
    expect(readings).toHaveLength(1);
    expect(faults).toEqual([
      { line: 3, why: 'the time "yesterday" cannot be read' },
      { line: 4, why: '"warm" is no temperature (a)' },
    ]);
  });

  it('says which columns there are, and what it could not read', () => {
    const device = [{ deviceId: 'a', temperature: 'Temp', humidity: null }];
    expect(() => readRecording('time,t\n2026-05-04 12:00,20\n', format({ time: ['time'] }), device)).toThrow(
      'There is no column Temp. Known are: time, t.',
    );
    expect(() =>
      readRecording('time,t\nx,20\n', format({ time: ['time'] }), [
        { deviceId: 'a', temperature: 't', humidity: null },
      ]),
    ).toThrow(/No reading could be read. Line 2/);
    expect(() => readRecording('', format(), device)).toThrow('The file holds no rows.');
  });
});

describe('the command line', () => {
  it('is read with its defaults', () => {
    const options = readOptions(
      [
        '--file',
        'house.txt',
        '--time',
        '1,2',
        '--map',
        'dining=3,8',
        '--enrol',
        'High Barn/South room',
        '--as',
        'a@b.c',
        '--day-first',
      ],
      { STILLROOM_PASSWORD: 'secret' },
    );
    expect(options).toMatchObject({
      format: { time: ['1', '2'], delimiter: ' ', dayFirst: true, zone: 'UTC' },
      devices: [{ deviceId: 'dining', temperature: '3', humidity: '8' }],
      enrol: { studio: 'High Barn', room: 'South room', password: 'secret' },
      speed: null,
    });
  });

  it.each([
    [[], /which file/],
    [['--file', 'a.csv'], /--map/],
    [['--file', 'a.csv', '--map', 'x'], /<name>=<value>/],
    [['--file', 'a.csv', '--map', 'a=1'], /secret/],
    [['--file', 'a.csv', '--map', 'a=1', '--device', 'a=s'], /--studio/],
    [['--file', 'a.csv', '--map', 'a=1', '--enrol', 'Quay Street'], /--as/],
    [['--file', 'a.csv', '--map', 'a=1', '--delimiter', 'pipe'], /--delimiter is one of/],
    [['--nonsense'], /--help/],
  ])('refuses %j with what to do', (args, why) => {
    expect(() => readOptions(args, {})).toThrow(OptionsError);
    expect(() => readOptions(args, {})).toThrow(why);
  });
});
