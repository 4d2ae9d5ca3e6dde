import type { LogAccount, LogWho } from './log-account';

/** A record of a log that has its parts in fields of their own. */
export interface LogEvent extends LogWho {
	message: string;
	statement: string | null;
}

const LOGGED_STATEMENT = /^(\S+: [\d.,]+ ms {2})?(?:statement|execute [^:]*): ([^]*)$/;

/** Gives an event to the account of its log; most say nothing of temporary files or plans. */
export function takeEvent(account: LogAccount, event: LogEvent): void {
	const { message, pid } = event;
	if (message.includes('pgsql_tmp')) {
		account.takeTemporaryFile(event, message);
		if (event.statement !== null) account.takeStatement(pid, event.statement);
		return;
	}
	if (message.includes('\n') && /^\S+: [\d.,]+ ms /.test(message)) {
		const end = message.indexOf('\n');
		if (account.takePlan(message.slice(0, end), message.slice(end + 1))) return;
	}
	if (message.includes('user=') && message.includes('database=')) account.takeConnection(pid, message);
	else if (message.includes('temp_file_limit')) account.takeFileLimit();
	else takeWords(account, message, pid);
}

/** Statements that log_statement and its like put into the message, and the banner of the start. */
export function takeWords(account: LogAccount, message: string, pid: string | null): void {
	const logged = message.includes(': ') ? LOGGED_STATEMENT.exec(message) : null;
	if (logged === null) account.takeVersion(message);
	else account.takeLogged(pid, logged[2] ?? '', logged[1] !== undefined);
}
