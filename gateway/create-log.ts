import { type DestinationStream, type Logger, pino } from 'pino';

/**
 * The gateway's log: one line of JSON each. Errors keep their kind, sentence, code and stack only: errors of the database carry the
 * statement with its values, and those may be addresses and hashes.
 */
export function createLog(level: string, to?: DestinationStream): Logger {
  return pino(
    {
      level,
      base: null,
      timestamp: pino.stdTimeFunctions.isoTime,
      serializers: { err: errorFacts },
    },
    to ?? pino.destination(1),
  );
}

function errorFacts(error: unknown): unknown {
  if (!(error instanceof Error)) return String(error);
  const { code } = error as { code?: unknown };
  return {
    type: error.name,
    message: error.message,
    ...(code === undefined ? {} : { code }),
    stack: error.stack,
    ...(error.cause === undefined ? {} : { cause: errorFacts(error.cause) }),
  };
}
