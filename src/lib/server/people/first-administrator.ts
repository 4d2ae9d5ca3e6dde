import { randomBytes, timingSafeEqual } from 'node:crypto';
import type { Person } from '$lib/domain/person/person';
import type { FirstInput } from '$lib/domain/person/person-input';
import { fail, ok, type Outcome } from '$lib/domain/problem';
import * as audit from '../audit/audit-service';
import { config } from '../config';
import { write } from '../db/transaction';
import { hashSecret } from '../secrets';
import { hashPassword } from './password';
import { findNewPasswordFault } from './password-fault';
import { hasPeople, insertPerson } from './people-store';
import { toActor } from './person-detail';
import { countFirstTry } from './sign-in-limits';

/** Without letters that look like figures (Crockford's base 32); 20 of them are 100 bits. */
const ALPHABET = '0123456789ABCDEFGHJKMNPQRSTVWXYZ';
const CODE_LENGTH = 20;

let code: string | null = null;

function makeCode(): string {
	return [...randomBytes(CODE_LENGTH)].map((byte) => ALPHABET[byte % ALPHABET.length] ?? '0').join('');
}

/**
 * The code that lets somebody become the first administrator, in groups of five. It lives in this process's
 * memory and is shown where the server was started, which only whoever runs it can read: an address of the caller
 * would prove nothing, since behind a proxy everybody comes from this machine.
 */
export function firstCode(): string {
	code ??= makeCode();
	return code.replace(/(.{5})(?=.)/g, '$1-');
}

/** Whether the installation has nobody yet. */
export async function isEmpty(): Promise<boolean> {
	return !(await hasPeople());
}

/** The lines that a start prints on an empty installation; none otherwise. */
export async function describeFirst(): Promise<string[]> {
	if (!(await isEmpty())) return [];
	return [
		'Nobody is here yet. Become the first administrator at',
		`  ${config().origin}/first`,
		`with this code, good until the server stops: ${firstCode()}`
	];
}

function isCode(typed: string): boolean {
	// What is easily mistaken when read off a screen counts as what was meant.
	const plain = typed
		.toUpperCase()
		.replaceAll('O', '0')
		.replace(/[IL]/g, '1')
		.replace(/[^0-9A-Z]/g, '');
	const expected = firstCode().replaceAll('-', '');
	return timingSafeEqual(Buffer.from(hashSecret(plain)), Buffer.from(hashSecret(expected)));
}

function somebodyIsHere() {
	const reason = 'Somebody is here already: an administrator invites you.';
	return fail('refused', reason, { reasons: [reason] });
}

/**
 * Makes the first administrator, who needs the code that the start printed. Refused as soon as there is anybody;
 * of two at once, one gets in.
 */
export async function makeFirst(input: FirstInput & { address: string }): Promise<Outcome<Person>> {
	if (!(await isEmpty())) return somebodyIsHere();
	const counted = await countFirstTry(input.address);
	if (!counted.ok) return counted;
	if (!isCode(input.code)) {
		const message = 'This is not the code that the server printed when it started.';
		return fail('invalid', message, { errors: [{ field: 'code', message }] });
	}
	const { name, email } = input;
	const fault = findNewPasswordFault(input.password, { name, email });
	if (fault) return fail('invalid', fault, { errors: [{ field: 'password', message: fault }] });
	const passwordHash = await hashPassword(input.password);
	const made = await write(async (t): Promise<Outcome<Person>> => {
		if (await hasPeople()) return somebodyIsHere();
		const role = 'administrator' as const;
		const createdAt = new Date().toISOString();
		const id = await insertPerson({ name, email, role, passwordHash, createdAt }, t);
		await audit.record(toActor({ id, name, role }), 'person.first', `person:${id}`, {}, t);
		return ok({ id, name });
	});
	if (made.ok) code = null;
	return made;
}
