import { parseArgs } from 'node:util';
import type { ColumnsOfDevice, RecordingFormat } from './recording.js';

/** Thrown for a command line that cannot be followed; the message says what to write. */
export class OptionsError extends Error {
  override readonly name = 'OptionsError';
}

export interface EnrolOptions {
  readonly url: string;
  readonly email: string;
  readonly password: string;
  readonly studio: string;
  /** null: a new room for every device. */
  readonly room: string | null;
}

export interface ReplayOptions {
  readonly file: string;
  readonly format: RecordingFormat;
  /** `deviceId` is a device or, with `enrol`, a name for the sensor to be enrolled. */
  readonly devices: readonly ColumnsOfDevice[];
  readonly mqttUrl: string;
  /** Device secrets by device id. */
  readonly secrets: ReadonlyMap<string, string>;
  /** Enrol the sensors first, through the API. */
  readonly enrol: EnrolOptions | null;
  /** Recorded seconds a second; null: as fast as it is acknowledged. */
  readonly speed: number | null;
  readonly studioId: string | null;
}

export const HELP = `Replays a recording of temperature and humidity over MQTT, like the sensors it came from.

  npm run replay -- --file <csv|txt|csv.gz> --map <name>=<temperature column>[,<humidity column>] … [options]

Columns are named as in the header or counted from 1. One --map per room of the file.

Who sends
  --enrol "<studio>/<room>"   enrols a sensor in that room for every --map, with sign-in (needs a lead or the owner);
                              leave the room out ("<studio>") to make a new room for every --map
  --as <e-mail>               sign-in; the password is taken from STILLROOM_PASSWORD or --password
  --url <address>             Stillroom's address              (http://127.0.0.1:4310)
  --device <id>=<secret>      or: an enrolled device; <name> in --map is then its id, and --studio its studio's id
  --mqtt <address>            the broker                       (mqtt://127.0.0.1:1883)

How the file is written
  --time <column>[,<column>]  time, or date and time           (1)
  --zone <IANA zone>          of times without a zone          (UTC)
  --delimiter comma|semicolon|tab|space                        (comma; space for .txt)
  --day-first                 13/03/2012 is a day in March
  --fahrenheit                temperatures in °F
  --decimal-comma             21,5

How fast
  --speed <n>                 n times as fast as recorded; without it as fast as it is acknowledged

Examples
  npm run replay -- --file office.csv --time date --map office=Temperature,Humidity --enrol "Quay Street" --as marit@larkrise.example
  npm run replay -- --file house.txt --time 1,2 --day-first --map dining=3,8 --map bedroom=4,9 --enrol "High Barn" --as marit@larkrise.example
  npm run replay -- --file eight-rooms.csv.gz --time date --map a=T1,RH_1 --map b=T2,RH_2 --device a=<secret> --device b=<secret> --studio <id>
`;

const DELIMITERS: Readonly<Record<string, string>> = { comma: ',', semicolon: ';', tab: '\t', space: ' ' };

/** Reads a command line. @throws OptionsError */
export function readOptions(
  args: readonly string[],
  environment: Readonly<Record<string, string | undefined>>,
): ReplayOptions {
  const { values } = parse(args);
  if (!values.file) throw new OptionsError('Say which file: --file <path>. --help shows all there is.');
  const devices = (values.map ?? []).map(readMap);
  if (devices.length === 0)
    throw new OptionsError(
      'Say where the values stand: --map <name>=<temperature column>,<humidity column>.',
    );
  const delimiter = values.delimiter ?? (/\.txt(\.gz)?$/.test(values.file) ? 'space' : 'comma');
  const separator = DELIMITERS[delimiter];
  if (separator === undefined)
    throw new OptionsError(`--delimiter is one of ${Object.keys(DELIMITERS).join(', ')}.`);
  const speed = values.speed === undefined ? null : Number(values.speed);
  if (speed !== null && !(speed > 0)) throw new OptionsError('--speed is a number above 0.');
  const secrets = new Map((values.device ?? []).map(readPair));
  const enrol = readEnrol(values, environment);
  if (enrol === null && devices.some(({ deviceId }) => !secrets.has(deviceId))) {
    throw new OptionsError(
      'Give every device its secret (--device <id>=<secret>) or enrol new ones (--enrol "<studio>/<room>" --as <e-mail>).',
    );
  }
  if (enrol === null && values.studio === undefined)
    throw new OptionsError('With --device say which studio: --studio <id>.');
  return {
    file: values.file,
    devices,
    format: {
      time: (values.time ?? '1').split(','),
      zone: values.zone ?? 'UTC',
      fahrenheit: values.fahrenheit ?? false,
      dayFirst: values['day-first'] ?? false,
      decimalComma: values['decimal-comma'] ?? false,
      delimiter: separator,
    },
    mqttUrl: values.mqtt ?? 'mqtt://127.0.0.1:1883',
    secrets,
    enrol,
    speed,
    studioId: values.studio ?? null,
  };
}

function parse(args: readonly string[]) {
  try {
    return parseArgs({
      args: [...args],
      options: {
        file: { type: 'string' },
        map: { type: 'string', multiple: true },
        enrol: { type: 'string' },
        as: { type: 'string' },
        password: { type: 'string' },
        url: { type: 'string' },
        device: { type: 'string', multiple: true },
        studio: { type: 'string' },
        mqtt: { type: 'string' },
        time: { type: 'string' },
        zone: { type: 'string' },
        delimiter: { type: 'string' },
        'day-first': { type: 'boolean' },
        fahrenheit: { type: 'boolean' },
        'decimal-comma': { type: 'boolean' },
        speed: { type: 'string' },
      },
    });
  } catch (error) {
    throw new OptionsError(
      `${error instanceof Error ? error.message : String(error)} --help shows all there is.`,
    );
  }
}

function readEnrol(
  values: ReturnType<typeof parse>['values'],
  environment: Readonly<Record<string, string | undefined>>,
): ReplayOptions['enrol'] {
  if (values.enrol === undefined) return null;
  const password = values.password ?? environment['STILLROOM_PASSWORD'];
  if (!values.as || !password) {
    throw new OptionsError(
      'To enrol sensors sign in: --as <e-mail> and the password in STILLROOM_PASSWORD (or --password).',
    );
  }
  const [studio, room] = values.enrol.split('/').map((part) => part.trim());
  return {
    url: (values.url ?? 'http://127.0.0.1:4310').replace(/\/$/, ''),
    email: values.as,
    password,
    studio: studio ?? '',
    room: room || null,
  };
}

function readMap(text: string): ColumnsOfDevice {
  const [deviceId, columns] = readPair(text);
  const [temperature, humidity] = columns.split(',').map((column) => column.trim());
  if (!temperature) throw new OptionsError(`--map ${text}: name the column of the temperature.`);
  return { deviceId, temperature, humidity: humidity || null };
}

function readPair(text: string): [string, string] {
  const at = text.indexOf('=');
  if (at < 1) throw new OptionsError(`${text} is not <name>=<value>.`);
  return [text.slice(0, at).trim(), text.slice(at + 1).trim()];
}
