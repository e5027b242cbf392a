import { SettingsError } from './settings.js';

/** A reason not to start that a person can do something about. */
export class StartFault extends Error {
  override readonly name = 'StartFault';
}

/** What to do about an error at the start, as sentences; null for one that nobody foresaw. */
export function startFaultInWords(error: unknown): string | null {
  if (error instanceof SettingsError || error instanceof StartFault) return error.message;
  const { code, port, address } = (error ?? {}) as { code?: string; port?: number; address?: string };
  switch (code) {
    case 'EADDRINUSE':
      return `Port ${port} on ${address} is taken by another program. Stop that, or choose another port: ${variableOf(port)}.`;
    case 'EACCES':
      return `Port ${port} on ${address} may not be used by this account. Choose one above 1023: ${variableOf(port)}.`;
    case 'EADDRNOTAVAIL':
      return `This machine has no address ${address}. Set STILLROOM_HTTP_HOST and STILLROOM_MQTT_HOST to one it has, e.g. 127.0.0.1.`;
    case 'ER_ACCESS_DENIED_ERROR':
    case 'ER_DBACCESS_DENIED_ERROR':
      return 'The database refuses this account. Check STILLROOM_DB_USER, STILLROOM_DB_PASSWORD and STILLROOM_DB_NAME.';
    case 'ER_BAD_DB_ERROR':
      return 'The database does not exist. Check STILLROOM_DB_NAME, then run gateway/migrate.';
    case 'ENOENT':
      return `A file named in the settings is missing: ${(error as Error).message}`;
    default:
      return null;
  }
}

function variableOf(port: number | undefined): string {
  return port === undefined
    ? 'STILLROOM_HTTP_PORT or STILLROOM_MQTT_PORT'
    : 'STILLROOM_HTTP_PORT for the pages, STILLROOM_MQTT_PORT for the devices';
}
