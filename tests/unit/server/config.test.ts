import { mkdtemp, readFile, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { ConfigError, isLoopback, readConfig } from '$lib/server/config';
import { readSecretKey } from '$lib/server/secret-key';

describe('readConfig', () => {
	it.each([
		['PORT', 'eighty'],
		['PORT', '70000'],
		['PORT', '-1'],
		['HOST', 'http://x'],
		['ORIGIN', 'catchwater.example.org'],
		['ORIGIN', 'https://catchwater.example.org/path'],
		['ORIGIN', 'https://catchwater.example.org/'],
		['MAX_UPLOAD_MB', '0'],
		['MAX_UPLOAD_MB', '2GB'],
		['SECRET_KEY', 'too short'],
		['SMTP_URL', 'mail.example.org'],
		['MAIL_FROM', 'nobody'],
		['LOG_LEVEL', 'loud']
	])('refuses %s=%s with one line that names the variable and not the value', (name, value) => {
		const read = () => readConfig({ [name]: value });
		expect(read).toThrow(ConfigError);
		expect(read).toThrow(new RegExp(`^${name}: `));
		expect(read).not.toThrow(/\n/);
		if (name === 'SECRET_KEY') expect(read).not.toThrow(/too short/);
	});

	it('fills in what is left unset or empty', () => {
		const config = readConfig({ PORT: '', HOST: '' });
		expect(config).toMatchObject({
			port: 3000,
			host: '127.0.0.1',
			origin: 'http://127.0.0.1:3000',
			maxUploadMb: 4096,
			smtpUrl: null,
			secretKey: null,
			logLevel: 'info'
		});
		expect(config.dataDir).toBe(path.resolve('./data'));
	});

	it('puts an IPv6 address into brackets', () => {
		expect(readConfig({ HOST: '::1', PORT: '4000' }).origin).toBe('http://[::1]:4000');
	});
});

describe('isLoopback', () => {
	it.each(['0.0.0.0', '::', '192.168.1.5', '127.0.0.1.example.org', 'localhost.example.org'])(
		'says no of %s',
		(host) => {
			expect(isLoopback(host)).toBe(false);
		}
	);
	it.each(['127.0.0.1', '127.1.2.3', 'localhost', '::1'])('says yes of %s', (host) => {
		expect(isLoopback(host)).toBe(true);
	});
});

describe('readSecretKey', () => {
	it('makes a key at the first start that its owner alone may read, and finds it again', async () => {
		const folder = await mkdtemp(path.join(tmpdir(), 'catchwater-'));
		const dataDir = path.join(folder, 'data');
		try {
			const key = readSecretKey({ dataDir, secretKey: null });
			expect(Buffer.from(key, 'base64url')).toHaveLength(32);
			expect((await stat(path.join(dataDir, 'secret.key'))).mode & 0o777).toBe(0o600);
			expect(readSecretKey({ dataDir, secretKey: null })).toBe(key);
			expect((await readFile(path.join(dataDir, 'secret.key'), 'utf8')).trim()).toBe(key);
		} finally {
			await rm(folder, { recursive: true, force: true });
		}
	});

	it('takes the one of the environment and writes none', () => {
		const key = 'k'.repeat(32);
		expect(readSecretKey({ dataDir: '/nowhere/at/all', secretKey: key })).toBe(key);
	});
});
