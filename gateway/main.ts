import { assemble } from './assemble.js';
import { createLog } from './create-log.js';
import { readSettings } from './settings.js';
import { startFaultInWords } from './start-faults.js';

/** Command: runs the gateway until SIGTERM or SIGINT. Exit 2: the settings or the surroundings need attention; 1: a fault of ours. */
const STOP_PATIENCE_MS = 12_000;

try {
  const settings = readSettings(process.env);
  const log = createLog(settings.logLevel);
  const gateway = assemble(settings, log);
  let stopping = false;
  const stop = async (signal: string) => {
    if (stopping) return;
    stopping = true;
    log.info({ signal }, 'stopping');
    setTimeout(() => process.exit(1), STOP_PATIENCE_MS).unref();
    await gateway.stop();
    log.info('stopped');
    process.exit(0);
  };
  process.on('SIGTERM', (signal) => void stop(signal));
  process.on('SIGINT', (signal) => void stop(signal));
  await gateway.start();
  log.info({ pages: settings.http.publicUrl, mqtt: settings.mqtt.port }, 'the gateway runs');
} catch (error) {
  const words = startFaultInWords(error);
  console.error(words ?? error);
  process.exit(words === null ? 1 : 2);
}
