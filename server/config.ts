import path from 'node:path';
import { z } from 'zod';
import { schemaWords } from '@/lib/document/issues';

interface Setting {
  name: string;
  default: string;
  words: string;
}

/** Every environment variable that the server reads, as README lists them. */
export const settings: readonly Setting[] = [
  { name: 'PORT', default: '8080', words: 'The port of page and API; 0 takes a free one.' },
  { name: 'HOST', default: '127.0.0.1', words: 'The address to listen on. A demo listens on a loopback address only.' },
  {
    name: 'DATA_DIR',
    default: './data-demo, or ./data where NODE_ENV is production',
    words:
      'Where the database and the packs lie. An empty ./data-demo becomes a demo team, any other an empty installation.',
  },
  {
    name: 'DEMO',
    default: 'yes for the default DATA_DIR outside production, else no',
    words:
      'Whether an empty DATA_DIR becomes a demo team of invented people: yes or no. A directory keeps what it became.',
  },
  {
    name: 'PUBLIC_URL',
    default: 'none',
    words:
      'The address people use, e.g. https://waveforms.example.org. Changes are taken from this origin alone; https makes the cookie Secure.',
  },
  {
    name: 'TRUST_PROXY',
    default: 'no',
    words:
      'yes where a reverse proxy stands before the server and sets X-Forwarded-For, -Proto and -Host; else these are ignored.',
  },
  {
    name: 'PACK_BYTES_MOST',
    default: '8589934592 (8 GiB)',
    words: 'The largest pack that may be asked for, in bytes.',
  },
  {
    name: 'RENDER_WORKERS',
    default: 'one less than there are cores',
    words: 'How many threads render a long pack, 1 to 64; the command line reads it too. The bytes are the same.',
  },
  { name: 'WEB_DIR', default: './dist', words: 'The exported page.' },
  { name: 'LOG_LEVEL', default: 'info', words: 'fatal, error, warn, info, debug or silent.' },
  {
    name: 'NODE_ENV',
    default: 'none',
    words: 'production refuses demo directories and takes ./data for DATA_DIR.',
  },
];

const yesNo = z
  .enum(['yes', 'no', '1', '0', 'true', 'false'])
  .transform((v) => v === 'yes' || v === '1' || v === 'true');

const originSchema = z.string().transform((value, context) => {
  const url = URL.canParse(value) ? new URL(value) : null;
  if (!url || !/^https?:$/.test(url.protocol)) context.addIssue('is not an http or https address');
  else if (url.pathname !== '/' || url.search !== '') context.addIssue('must not have a path');
  return url?.origin ?? '';
});

const wholeNumber = z.coerce
  .number({ error: ({ code }) => (code === 'invalid_type' ? 'is not a number' : undefined) })
  .int('is not a whole number');

export const envSchema = z.object({
  PORT: wholeNumber.min(0).max(65535).default(8080),
  HOST: z.string().min(1).default('127.0.0.1'),
  DATA_DIR: z.string().min(1).optional(),
  DEMO: yesNo.optional(),
  PUBLIC_URL: originSchema.optional(),
  TRUST_PROXY: yesNo.default(false),
  PACK_BYTES_MOST: wholeNumber
    .min(1)
    .max(2 ** 43)
    .default(8 * 2 ** 30),
  RENDER_WORKERS: wholeNumber.min(1).max(64).optional(),
  WEB_DIR: z.string().min(1).default('dist'),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'silent']).default('info'),
  NODE_ENV: z.string().optional(),
});

export interface Config {
  readonly port: number;
  readonly host: string;
  readonly dataDir: string;
  /** What an empty directory becomes. */
  readonly wantsDemo: boolean;
  readonly publicOrigin: string | null;
  readonly trustsProxy: boolean;
  readonly packBytesMost: number;
  /** Threads that render a long pack; as many as the machine suggests where undefined. */
  readonly renderWorkers: number | undefined;
  readonly webDir: string;
  /** Bundled server, threads and command line. */
  readonly buildDir: string;
  readonly migrationsDir: string;
  readonly logLevel: string;
  readonly isProduction: boolean;
}

/** A start refused with a sentence for the person at the terminal; no stack is shown. */
export class StartRefused extends Error {}

type Environment = Readonly<Record<string, string | undefined>>;

function readSettings<Schema extends z.ZodType>(schema: Schema, env: Environment): z.output<Schema> {
  // An empty value is what a compose file leaves behind: it means "not set".
  const given = Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''));
  const parsed = schema.safeParse(given, { error: schemaWords });
  if (parsed.success) return parsed.data;
  const words = parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('; ');
  throw new StartRefused(`The settings are not right. ${words}`);
}

/** The one setting that the command line has as well. Throws StartRefused. */
export const readRenderWorkers = (env: Environment): number | undefined =>
  readSettings(envSchema.pick({ RENDER_WORKERS: true }), env).RENDER_WORKERS;

/** Reads the environment once. `rootDir` is the folder of package.json; relative directories hang on it. */
export function readConfig(env: Environment, rootDir: string): Config {
  const e = readSettings(envSchema, env);
  const isProduction = e.NODE_ENV === 'production';
  const wantsDemo = e.DEMO ?? (e.DATA_DIR === undefined && !isProduction);
  return {
    port: e.PORT,
    host: e.HOST,
    dataDir: path.resolve(rootDir, e.DATA_DIR ?? (isProduction ? 'data' : 'data-demo')),
    wantsDemo,
    publicOrigin: e.PUBLIC_URL ?? null,
    trustsProxy: e.TRUST_PROXY,
    packBytesMost: e.PACK_BYTES_MOST,
    renderWorkers: e.RENDER_WORKERS,
    webDir: path.resolve(rootDir, e.WEB_DIR),
    buildDir: path.resolve(rootDir, 'build'),
    migrationsDir: path.resolve(rootDir, 'db/migrations'),
    logLevel: e.LOG_LEVEL,
    isProduction,
  };
}

export function isLoopback(host: string): boolean {
  return host === 'localhost' || host === '::1' || host === '[::1]' || /^127(\.\d{1,3}){3}$/.test(host);
}
