import type { TextPart } from '$lib/domain/runbook/compare-revisions';

/** A piece as it is shown; `folded`: how many lines of unchanged text are left out here, 0: none. */
export interface ShownPart extends TextPart {
	folded: number;
}

/** Lines of unchanged text that stay visible beside a change. */
const BESIDE = 3;

/** Unchanged text far from any change is left out, with how many lines that are. */
export function foldParts(parts: readonly TextPart[]): ShownPart[] {
	return parts.flatMap((part, index): ShownPart[] => {
		if (part.change !== 'same') return [{ ...part, folded: 0 }];
		const lines = part.text.split('\n');
		const head = index === 0 ? 0 : BESIDE;
		const tail = index === parts.length - 1 ? 0 : BESIDE;
		const hidden = lines.length - head - tail;
		if (hidden <= BESIDE) return [{ ...part, folded: 0 }];
		const shown = (text: string): ShownPart[] => (text === '' ? [] : [{ text, change: 'same', folded: 0 }]);
		return [
			...shown(
				lines
					.slice(0, head)
					.map((line) => `${line}\n`)
					.join('')
			),
			{ text: '', change: 'same', folded: hidden },
			...shown(tail === 0 ? '' : lines.slice(-tail).join('\n'))
		];
	});
}
