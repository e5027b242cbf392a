import { join } from 'node:path';
import { z } from 'zod';

const port = (fallback: number) => z.coerce.number().int().min(1).max(65_535).default(fallback);

const schema = z.object({
  STILLROOM_MQTT_HOST: z.string().default('127.0.0.1'),
  STILLROOM_MQTT_PORT: port(1883),
  STILLROOM_SMTP_PORT: port(4325),
  STILLROOM_DESK_PORT: port(4320),
  STILLROOM_SIMULATOR_SECRET: z.string().min(32),
  STILLROOM_DATA_DIR: z.string().default('.stillroom'),
  STILLROOM_PUBLIC_URL: z.string().optional(),
  STILLROOM_HTTP_PORT: port(4310),
});

export interface SimulatorSettings {
  readonly mqttUrl: string;
  readonly smtpPort: number;
  readonly deskPort: number;
  readonly secret: string;
  /** Folder with the scenario, the devices' secrets and the simulator's own memory. */
  readonly folder: string;
  readonly pagesUrl: string;
}

/** Reads the settings from an environment. @throws ZodError naming what is missing */
export function readSimulatorSettings(
  environment: Readonly<Record<string, string | undefined>>,
): SimulatorSettings {
  const values = schema.parse(environment);
  return {
    mqttUrl: `mqtt://${values.STILLROOM_MQTT_HOST}:${values.STILLROOM_MQTT_PORT}`,
    smtpPort: values.STILLROOM_SMTP_PORT,
    deskPort: values.STILLROOM_DESK_PORT,
    secret: values.STILLROOM_SIMULATOR_SECRET,
    folder: join(values.STILLROOM_DATA_DIR, 'simulator'),
    pagesUrl: values.STILLROOM_PUBLIC_URL ?? `http://127.0.0.1:${values.STILLROOM_HTTP_PORT}`,
  };
}
