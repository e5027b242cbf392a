import { z } from 'zod';

const port = (fallback: number) => z.coerce.number().int().min(1).max(65_535).default(fallback);
const flag = z
  .enum(['0', '1', 'true', 'false'])
  .default('0')
  .transform((value) => value === '1' || value === 'true');
const secret = z.string().min(32, 'needs at least 32 characters of randomness');

const schema = z.object({
  STILLROOM_COMPANY: z.string().min(1).default('My candle company'),
  STILLROOM_HTTP_HOST: z.string().default('127.0.0.1'),
  STILLROOM_HTTP_PORT: port(4310),
  /** Address people type; links in e-mails start with it. */
  STILLROOM_PUBLIC_URL: z.url().optional(),
  STILLROOM_MQTT_HOST: z.string().default('127.0.0.1'),
  STILLROOM_MQTT_PORT: port(1883),
  STILLROOM_MQTT_TLS_CERT: z.string().optional(),
  STILLROOM_MQTT_TLS_KEY: z.string().optional(),
  STILLROOM_DB_HOST: z.string().default('127.0.0.1'),
  STILLROOM_DB_PORT: port(33_061),
  STILLROOM_DB_NAME: z.string().default('stillroom'),
  /** Run-time account: reads and writes rows, changes no tables. */
  STILLROOM_DB_USER: z.string().default('stillroom_app'),
  STILLROOM_DB_PASSWORD: z.string().min(1),
  STILLROOM_JWT_SECRET: secret,
  STILLROOM_SMTP_URL: z.url().default('smtp://127.0.0.1:4325'),
  STILLROOM_MAIL_FROM: z.string().default('Stillroom <stillroom@localhost>'),
  STILLROOM_WEB_DIR: z.string().default('dist/web'),
  STILLROOM_DEMO: flag,
  /** Demo only: secret of the simulator's own device, which may publish the demo clock. */
  STILLROOM_SIMULATOR_SECRET: secret.optional(),
  /** Demo only: page of the simulator with mailbox and faults. */
  STILLROOM_DESK_URL: z.url().default('http://127.0.0.1:4320'),
  STILLROOM_LOG_LEVEL: z.enum(['trace', 'debug', 'info', 'warn', 'error', 'silent']).default('info'),
});

export interface Settings {
  readonly company: string;
  readonly http: {
    readonly host: string;
    readonly port: number;
    readonly publicUrl: string;
    readonly secureCookies: boolean;
    readonly webDir: string;
  };
  readonly mqtt: {
    readonly host: string;
    readonly port: number;
    readonly tls: { readonly certFile: string; readonly keyFile: string } | null;
  };
  readonly database: {
    readonly host: string;
    readonly port: number;
    readonly name: string;
    readonly user: string;
    readonly password: string;
  };
  readonly jwtSecret: string;
  readonly mail: { readonly smtpUrl: string; readonly from: string };
  readonly demo: { readonly deskUrl: string; readonly simulatorSecret: string } | null;
  readonly logLevel: string;
}

/** Thrown when the environment is not usable; the message lists every fault at once. */
export class SettingsError extends Error {
  override readonly name = 'SettingsError';
}

/**
 * Reads the settings from an environment once and freezes them.
 * @throws SettingsError naming every variable that is missing or wrong
 */
export function readSettings(environment: Readonly<Record<string, string | undefined>>): Settings {
  const given = Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''));
  const parsed = schema.safeParse(given);
  const faults = parsed.success
    ? []
    : parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
  const values = parsed.data;
  if (values?.STILLROOM_DEMO && !values.STILLROOM_SIMULATOR_SECRET)
    faults.push('STILLROOM_SIMULATOR_SECRET: needed in the demo');
  if (values && Boolean(values.STILLROOM_MQTT_TLS_CERT) !== Boolean(values.STILLROOM_MQTT_TLS_KEY)) {
    faults.push('STILLROOM_MQTT_TLS_CERT and STILLROOM_MQTT_TLS_KEY: give both or neither');
  }
  if (!values || faults.length > 0)
    throw new SettingsError(`These settings need attention:\n  ${faults.join('\n  ')}`);
  const publicUrl =
    values.STILLROOM_PUBLIC_URL ?? `http://${values.STILLROOM_HTTP_HOST}:${values.STILLROOM_HTTP_PORT}`;
  return Object.freeze({
    company: values.STILLROOM_COMPANY,
    http: Object.freeze({
      host: values.STILLROOM_HTTP_HOST,
      port: values.STILLROOM_HTTP_PORT,
      publicUrl: publicUrl.replace(/\/$/, ''),
      secureCookies: publicUrl.startsWith('https:'),
      webDir: values.STILLROOM_WEB_DIR,
    }),
    mqtt: Object.freeze({
      host: values.STILLROOM_MQTT_HOST,
      port: values.STILLROOM_MQTT_PORT,
      tls:
        values.STILLROOM_MQTT_TLS_CERT && values.STILLROOM_MQTT_TLS_KEY
          ? Object.freeze({
              certFile: values.STILLROOM_MQTT_TLS_CERT,
              keyFile: values.STILLROOM_MQTT_TLS_KEY,
            })
          : null,
    }),
    database: Object.freeze({
      host: values.STILLROOM_DB_HOST,
      port: values.STILLROOM_DB_PORT,
      name: values.STILLROOM_DB_NAME,
      user: values.STILLROOM_DB_USER,
      password: values.STILLROOM_DB_PASSWORD,
    }),
    jwtSecret: values.STILLROOM_JWT_SECRET,
    mail: Object.freeze({ smtpUrl: values.STILLROOM_SMTP_URL, from: values.STILLROOM_MAIL_FROM }),
    demo: values.STILLROOM_DEMO
      ? Object.freeze({
          deskUrl: values.STILLROOM_DESK_URL,
          simulatorSecret: values.STILLROOM_SIMULATOR_SECRET ?? '',
        })
      : null,
    logLevel: values.STILLROOM_LOG_LEVEL,
  });
}
