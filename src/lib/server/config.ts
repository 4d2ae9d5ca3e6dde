import path from 'node:path';
import { z } from 'zod';

/** The settings of this process, validated once. Nothing else reads the environment. */
export interface Config {
	/** Absolute path of the data folder. */
	dataDir: string;
	port: number;
	host: string;
	/** Scheme, host and port as a browser writes them; decides whether cookies are Secure. */
	origin: string;
	maxUploadMb: number;
	/** null: the key file in the data folder is used (secret-key.ts). */
	secretKey: string | null;
	logLevel: LogLevel;
	/** null: mail goes to the outbox in the data folder. */
	smtpUrl: string | null;
	mailFrom: string;
}

const LOG_LEVELS = ['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent'] as const;
export type LogLevel = (typeof LOG_LEVELS)[number];

/** A wrong setting: its message is the one line that the start prints. */
export class ConfigError extends Error {}

function isOrigin(text: string): boolean {
	if (!URL.canParse(text)) return false;
	const url = new URL(text);
	return /^https?:$/.test(url.protocol) && url.origin === text;
}

const PORT_RULE = 'give a whole number from 0 to 65535';
const UPLOAD_RULE = 'give a whole number of megabytes from 1 to 1048576';

const environment = z.object({
	DATA_DIR: z.string().default('./data'),
	PORT: z
		.string()
		.regex(/^\d+$/, PORT_RULE)
		.transform(Number)
		.pipe(z.number().max(65535, PORT_RULE))
		.default(3000),
	HOST: z
		.string()
		.regex(/^[\w.:-]+$/, 'give a host name or an address to listen on, such as 127.0.0.1')
		.default('127.0.0.1'),
	ORIGIN: z
		.string()
		.refine(isOrigin, 'give scheme, host and port without a path, such as https://catchwater.example.org')
		.optional(),
	MAX_UPLOAD_MB: z
		.string()
		.regex(/^\d+$/, UPLOAD_RULE)
		.transform(Number)
		.pipe(z.number().min(1, UPLOAD_RULE).max(1_048_576, UPLOAD_RULE))
		.default(4096),
	SECRET_KEY: z.string().min(32, 'give at least 32 characters, or leave it unset').optional(),
	LOG_LEVEL: z.enum(LOG_LEVELS, { error: `give one of ${LOG_LEVELS.join(', ')}` }).default('info'),
	SMTP_URL: z
		.string()
		.refine((text) => URL.canParse(text) && /^smtps?:$/.test(new URL(text).protocol), {
			error: 'give an address that begins with smtp:// or smtps://'
		})
		.optional(),
	MAIL_FROM: z
		.string()
		.regex(/^[^\r\n]*@[^\r\n]+$/, 'give an e-mail address')
		.default('Catchwater <catchwater@localhost>')
});

/** An address in brackets where it is an IPv6 one, as it stands in a URL. */
function toUrlHost(host: string): string {
	return host.includes(':') ? `[${host}]` : host;
}

/**
 * The settings that an environment spells out, defaults filled in. Throws ConfigError, naming the first
 * variable that is wrong; values are never repeated, since some are secrets. An empty value counts as unset.
 */
export function readConfig(env: Record<string, string | undefined>): Config {
	const given = withoutEmpty(env);
	const result = environment.safeParse(given);
	if (!result.success) {
		const issue = result.error.issues[0];
		throw new ConfigError(`${issue?.path.join('.') ?? 'environment'}: ${issue?.message ?? 'is wrong'}.`);
	}
	const values = result.data;
	return {
		dataDir: path.resolve(values.DATA_DIR),
		port: values.PORT,
		host: values.HOST,
		origin: values.ORIGIN ?? `http://${toUrlHost(values.HOST)}:${values.PORT}`,
		maxUploadMb: values.MAX_UPLOAD_MB,
		secretKey: values.SECRET_KEY ?? null,
		logLevel: values.LOG_LEVEL,
		smtpUrl: values.SMTP_URL ?? null,
		mailFrom: values.MAIL_FROM
	};
}

let current: Config | null = null;

/**
 * The settings of this process; read from the environment at the first call, where `defaults` fill in what it
 * leaves unset. Throws ConfigError.
 */
export function config(defaults: Record<string, string> = {}): Config {
	current ??= readConfig({ ...defaults, ...withoutEmpty(process.env) });
	return current;
}

function withoutEmpty(env: Record<string, string | undefined>): Record<string, string | undefined> {
	return Object.fromEntries(Object.entries(env).filter(([, value]) => value !== ''));
}

/** Lays other settings over those of the environment: programs with their own arguments, and tests. */
export function overrideConfig(settings: Partial<Config>): Config {
	current = { ...config(), ...settings };
	return current;
}

/** What the adapter counts a request's body against, beyond the largest upload: its parts' heads and fields. */
const BODY_ALLOWANCE_MB = 16;
/** How long a stop waits for answers under way. */
const SHUTDOWN_SECONDS = 10;

/**
 * Hands settings to the built server, which reads the environment itself, in its own bundle. Only for a
 * program that starts the server in its own process.
 */
export function handToServer(settings: Config): void {
	const { env } = process;
	env.DATA_DIR = settings.dataDir;
	env.HOST = settings.host;
	env.PORT = String(settings.port);
	env.ORIGIN = settings.origin;
	env.BODY_SIZE_LIMIT ??= `${settings.maxUploadMb + BODY_ALLOWANCE_MB}M`;
	env.SHUTDOWN_TIMEOUT ??= String(SHUTDOWN_SECONDS);
}

/** Whether a host is reached from this machine alone. */
export function isLoopback(host: string): boolean {
	return host === 'localhost' || host === '::1' || /^127(\.\d{1,3}){3}$/.test(host);
}
