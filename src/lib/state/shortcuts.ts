const KEY = 'catchwater.slash';

/** Whether `/` alone may focus the search: on until the person turns it off on this device (WCAG 2.1.4). */
export function readSlashShortcut(): boolean {
	return localStorage.getItem(KEY) !== 'off';
}

/** Turns the single-character shortcut on or off on this device. */
export function keepSlashShortcut(on: boolean): void {
	if (on) localStorage.removeItem(KEY);
	else localStorage.setItem(KEY, 'off');
}

/** Whether the key was pressed where text is written: there it is a character, not a shortcut. */
export function isWriting(target: EventTarget | null): boolean {
	return (
		target instanceof HTMLElement &&
		(target.isContentEditable || target.matches('input, textarea, select, [role="textbox"]'))
	);
}

/** Whether the key asks for the search box: `/`, or Ctrl+K (Cmd+K), but never while writing. */
export function asksForSearch(event: KeyboardEvent): boolean {
	if (isWriting(event.target) || event.altKey || event.defaultPrevented) return false;
	if (event.key === '/') return !event.ctrlKey && !event.metaKey && readSlashShortcut();
	return event.key.toLowerCase() === 'k' && (event.ctrlKey || event.metaKey) && !event.shiftKey;
}
