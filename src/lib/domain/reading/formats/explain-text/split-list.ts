/** The items of a comma list; commas inside parentheses, brackets and quotes don't count. */
export function splitList(text: string): string[] {
	if (!/[("'[]/.test(text)) return text.split(', ');
	const items: string[] = [];
	let depth = 0;
	let start = 0;
	for (let i = 0; i < text.length; i++) {
		const mark = text[i];
		if (mark === '(' || mark === '[') depth++;
		else if (mark === ')' || mark === ']') depth--;
		else if (mark === '"' || mark === "'") {
			const close = text.indexOf(mark, i + 1);
			if (close < 0) break;
			i = close;
		} else if (mark === ',' && depth <= 0) {
			items.push(text.slice(start, i).trim());
			start = i + 1;
		}
	}
	items.push(text.slice(start).trim());
	return items;
}
