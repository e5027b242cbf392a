import { parse } from 'csv-parse/sync';
import { DateTime } from 'luxon';
import { fromFahrenheit } from '#shared/units/temperature';

/** How a recording is written. */
export interface RecordingFormat {
  /** Column of the time, or of date and time. A name of the header or a number from 1. */
  readonly time: readonly string[];
  /** IANA zone of times without one of their own. */
  readonly zone: string;
  readonly fahrenheit: boolean;
  readonly dayFirst: boolean;
  readonly decimalComma: boolean;
  readonly delimiter: string;
}

/** Where a device's values stand. */
export interface ColumnsOfDevice {
  readonly deviceId: string;
  readonly temperature: string;
  readonly humidity: string | null;
}

export interface RecordedReading {
  readonly deviceId: string;
  /** Epoch ms. */
  readonly at: number;
  readonly celsius: number;
  readonly humidity: number | null;
}

export interface Recording {
  /** In the order of the file. */
  readonly readings: readonly RecordedReading[];
  readonly rows: number;
  /** Rows that could not be read, with their line and why. */
  readonly faults: readonly { readonly line: number; readonly why: string }[];
}

/** Thrown when a recording cannot be read at all; the message says what to change. */
export class RecordingError extends Error {
  override readonly name = 'RecordingError';
}

const HEADER_SEARCH = 20;

/**
 * Reads a recording: separated by commas, semicolons, tabs or spaces; a header that may begin with #; rows with one field more than
 * the header (a leading row number); quotes or none; numbers padded with spaces. Rows that cannot be read are named and left out.
 * @throws RecordingError when a column does not exist or nothing can be read
 */
export function readRecording(
  text: string,
  format: RecordingFormat,
  devices: readonly ColumnsOfDevice[],
): Recording {
  const rows = fieldsOf(text, format);
  const [first] = rows;
  if (!first) throw new RecordingError('The file holds no rows.');
  const header = headerOf(first.fields);
  const body = header === null ? rows : rows.slice(1);
  const width = header?.length ?? first.fields.length;
  const column = (name: string): number => indexOf(name, header, width);
  const time = format.time.map(column);
  const columns = devices.map((device) => ({
    deviceId: device.deviceId,
    temperature: column(device.temperature),
    humidity: device.humidity === null ? null : column(device.humidity),
  }));
  const readings: RecordedReading[] = [];
  const faults: { line: number; why: string }[] = [];
  for (const { line, fields } of body) {
    // One field more than the header: a row number stands in front.
    const shift = header !== null && fields.length === header.length + 1 ? 1 : 0;
    const at = readTime(time.map((index) => fields[index + shift] ?? '').join(' '), format);
    if (at === null) {
      faults.push({
        line,
        why: `the time "${time.map((index) => fields[index + shift] ?? '').join(' ')}" cannot be read`,
      });
      continue;
    }
    for (const { deviceId, temperature, humidity } of columns) {
      const celsius = readNumber(fields[temperature + shift], format);
      const percent = humidity === null ? null : readNumber(fields[humidity + shift], format);
      if (celsius === null) {
        faults.push({ line, why: `"${fields[temperature + shift] ?? ''}" is no temperature (${deviceId})` });
        continue;
      }
      readings.push({
        deviceId,
        at,
        celsius: format.fahrenheit ? fromFahrenheit(celsius) : celsius,
        humidity: percent,
      });
    }
  }
  if (readings.length === 0) {
    const why = faults[0] ? ` Line ${faults[0].line}: ${faults[0].why}.` : '';
    throw new RecordingError(
      `No reading could be read.${why} Check the columns and the way times are written.`,
    );
  }
  return { readings, rows: body.length, faults };
}

interface Row {
  readonly line: number;
  readonly fields: string[];
}

function fieldsOf(text: string, { delimiter }: RecordingFormat): Row[] {
  const lines = text.split(/\r?\n/);
  const comments = lines.findIndex(
    (line, index) => index < HEADER_SEARCH && line.trim() !== '' && !line.startsWith('#'),
  );
  // Of the lines that begin with # the last one before the data may be the header.
  const headerAt = comments > 0 ? comments - 1 : -1;
  return lines.flatMap((raw, index): Row[] => {
    if (raw.trim() === '' || (raw.startsWith('#') && index !== headerAt)) return [];
    const line = raw.startsWith('#') ? raw.slice(1) : raw;
    return [{ line: index + 1, fields: splitLine(line, delimiter) }];
  });
}

function splitLine(line: string, delimiter: string): string[] {
  if (delimiter === ' ') return line.trim().split(/\s+/);
  try {
    const rows: string[][] = parse(line, {
      delimiter,
      relax_column_count: true,
      trim: true,
      relax_quotes: true,
    });
    return (rows[0] ?? []).map((field) => field.trim());
  } catch {
    return line.split(delimiter).map((field) => field.trim());
  }
}

/** A first row in which nothing is a number or a time is the header. */
function headerOf(fields: readonly string[]): string[] | null {
  const isData = fields.some((field) => /^[-+]?\d/.test(field) && !/^\d+:[A-Za-z]/.test(field));
  if (isData) return null;
  // "3:Temperature_Comedor" names the third column.
  return fields.map((field) => field.replace(/^\d+:/, ''));
}

function indexOf(name: string, header: readonly string[] | null, width: number): number {
  const named = header?.indexOf(name) ?? -1;
  if (named >= 0) return named;
  const number = Number(name);
  if (Number.isInteger(number) && number >= 1 && number <= width) return number - 1;
  const known = header === null ? `numbers 1 to ${width}` : header.join(', ');
  throw new RecordingError(`There is no column ${name}. Known are: ${known}.`);
}

/** A number with or without decimal comma; null when it is none (an empty field, NA, text). */
function readNumber(field: string | undefined, { decimalComma }: RecordingFormat): number | null {
  const text = (field ?? '').trim();
  if (text === '') return null;
  const value = Number(decimalComma ? text.replace(/\./g, '').replace(',', '.') : text);
  return Number.isFinite(value) ? value : null;
}

/** Epoch ms of a written time; null when it cannot be read. */
function readTime(written: string, { zone, dayFirst }: RecordingFormat): number | null {
  const text = written.trim();
  if (/^\d{9,11}(\.\d+)?$/.test(text)) return Math.round(Number(text) * 1000);
  const slashes = /^(\d{1,2})[/.-](\d{1,2})[/.-](\d{4})[ T]+(\d{1,2}):(\d{2})(?::(\d{2}))?/.exec(text);
  if (slashes) {
    const [, a, b, year, hour, minute, second] = slashes.map(Number);
    const [day, month] = dayFirst ? [a, b] : [b, a];
    return millisOf(DateTime.fromObject({ year, month, day, hour, minute, second: second || 0 }, { zone }));
  }
  return millisOf(DateTime.fromISO(text.replace(/^(\d{4}-\d{2}-\d{2})\s+/, '$1T'), { zone }));
}

function millisOf(time: DateTime): number | null {
  return time.isValid ? time.toMillis() : null;
}
