import type { Plan, ReadingWarning } from '../../reading';
import { isRecord } from '../postgres/plan-node';
import { toPlan } from '../postgres/to-plan';
import { statementAbove } from '../statement-above';
import { blankDecoration } from '../undecorate';
import { takeFooter, takeJitLine } from './footer';
import { readNodeLine } from './node-line';
import { PlanBuilder } from './plan-builder';

const LABEL = /^(?:(?:InitPlan|SubPlan) \S+|CTE .+?)(?: \(returns [^)]*\))?$/;
const PROPERTY = /^([A-Z][A-Za-z0-9/ -]{0,40}?):(?:\s+(.*))?$/;
const WORKER = /^Worker (\d+):\s*(.*)$/;
const FIGURES = /\((?:cost=|actual |never executed)/;

/** Reads the lines of a text form, one plan after the other. */
export class TextPlanReader {
	readonly warnings: ReadingWarning[] = [];
	private readonly lines: string[];
	private readonly plans: Plan[] = [];
	private above: string[] = [];
	private statement: string | null = null;
	private builder: PlanBuilder | null = null;
	private section: 'jit' | 'other' | null = null;
	private unknown = 0;
	private firstUnknown: number | null = null;
	private durationMs: string | null = null;

	constructor(text: string) {
		this.lines = blankDecoration(text).split('\n');
	}

	read(): Plan[] {
		for (let i = 0; i < this.lines.length; i++) {
			const line = this.lines[i] ?? '';
			const body = line.trim();
			if (body === '') {
				if (this.builder === null) this.above.push('');
				continue;
			}
			const joined = this.joinWrapped(body, i);
			this.take(indentOf(line), joined.text, i);
			i += joined.extra;
		}
		this.finishPlan();
		this.countAbove(this.above);
		this.warnUnknown();
		return this.plans;
	}

	/** Mail and chat break long lines: a node goes on until its parentheses are closed. */
	private joinWrapped(body: string, index: number): { text: string; extra: number } {
		let text = body;
		let extra = 0;
		while (extra < 4) {
			const next = this.lines[index + extra + 1]?.trim() ?? '';
			const open = FIGURES.test(text) && text.lastIndexOf('(') > text.lastIndexOf(')');
			if (next === '' || !(open || text === '->' || /^\((?:cost=|actual |never executed)/.test(next))) break;
			text = `${text} ${next}`;
			extra++;
		}
		return { text, extra };
	}

	private take(column: number, text: string, index: number): void {
		if (text.startsWith('->') && !(this.builder?.ended ?? false)) {
			const node = text.slice(2).trim();
			if (this.builder !== null) this.builder.addNode(column, node);
			else this.begin(column, node, index);
			return;
		}
		if (this.builder !== null && this.takeInPlan(this.builder, column, text)) return;
		if (this.begin(column, text, index)) return;
		if (this.builder === null) this.above.push(this.lines[index] ?? text);
		else if (this.builder.ended || this.builder.isOverAt(column, text)) this.nextAbove(index, text);
		else if (!this.builder.continueProperty(text)) this.countUnknown(index);
	}

	private takeInPlan(builder: PlanBuilder, column: number, text: string): boolean {
		const footer = takeFooter(text, builder.envelope);
		if (footer !== null) {
			this.section = footer;
			builder.ended = true;
			return true;
		}
		const property = PROPERTY.exec(text);
		if (this.section !== null) {
			if (property === null || QUERY_TEXT.test(text)) return false;
			const jit = builder.envelope['JIT'];
			if (this.section === 'jit' && isRecord(jit)) takeJitLine(text, jit);
			return true;
		}
		if (LABEL.test(text)) builder.addLabel(column, text);
		else if (WORKER.test(text)) this.takeWorker(builder, column, text);
		else if (property !== null && !QUERY_TEXT.test(text))
			builder.addProperty(column, property[1] ?? '', property[2] ?? '');
		else return false;
		return true;
	}

	private takeWorker(builder: PlanBuilder, column: number, text: string): void {
		const [, number = '', rest = ''] = WORKER.exec(text) ?? [];
		builder.addWorker(column, number);
		const property = PROPERTY.exec(rest);
		if (property !== null) builder.addProperty(column + 1, property[1] ?? '', property[2] ?? '');
	}

	/** Begins a plan at a line that names an operator and stands under no arrow. */
	private begin(column: number, text: string, index: number): boolean {
		const bare = text.startsWith('->') ? text.slice(2).trim() : text;
		const node = readNodeLine(bare, false);
		if (node === null || (!FIGURES.test(bare) && !this.hasBodyBelow(index, column))) return false;
		this.finishPlan();
		this.takeAbove();
		this.builder = new PlanBuilder(column, node);
		this.section = null;
		return true;
	}

	/** Without figures an operator's name could be any word: a plan has a body below it, or nothing at all. */
	private hasBodyBelow(index: number, column: number): boolean {
		const next = this.lines.slice(index + 1).find((line) => line.trim() !== '');
		if (next === undefined) return this.above.every((line) => line.trim() === '');
		return isPlanBody(next.trim()) && indentOf(next) >= column;
	}

	private nextAbove(index: number, text: string): void {
		this.finishPlan();
		this.above.push(this.lines[index] ?? text);
	}

	private takeAbove(): void {
		const found = statementAbove(this.above);
		this.statement = found.statement;
		this.durationMs = /\bduration: ([\d.]+) ms {1,2}plan:/.exec(this.above.join('\n'))?.[1] ?? null;
		if (found.unknownLines > 0) this.unknown += found.unknownLines;
		this.above = [];
	}

	private countAbove(lines: string[]): void {
		this.unknown += statementAbove(lines).unknownLines;
	}

	private finishPlan(): void {
		const builder = this.builder;
		this.builder = null;
		if (builder === null) return;
		const warnings: ReadingWarning[] = [];
		if (builder.finish()) {
			const message = 'The indentation was lost; which operator feeds which was worked out from their kinds.';
			warnings.push({ code: 'indentation-lost', message, at: null });
		}
		if (this.statement !== null) builder.envelope['Query Text'] = this.statement;
		if (this.durationMs !== null) builder.envelope['Execution Time'] ??= this.durationMs;
		const plan = toPlan(builder.envelope, warnings);
		if (plan !== null) this.plans.push(plan);
		this.statement = null;
	}

	private countUnknown(index: number): void {
		this.unknown++;
		this.firstUnknown ??= index;
	}

	private warnUnknown(): void {
		if (this.unknown === 0) return;
		const lines = this.unknown === 1 ? '1 line is' : `${this.unknown} lines are`;
		const at = this.firstUnknown === null ? null : { line: this.firstUnknown + 1, column: 1 };
		this.warnings.push({
			code: 'lines-not-understood',
			message: `${lines} no part of a plan and passed over.`,
			at
		});
	}
}

/** Whether a line may stand below an operator: an arrow, a property or the label of a subplan. */
export function isPlanBody(body: string): boolean {
	return body.startsWith('->') || PROPERTY.test(body) || LABEL.test(body);
}

const QUERY_TEXT = /^(?:Query Text|Query Parameters):/;

function indentOf(line: string): number {
	let column = 0;
	for (const mark of line) {
		if (mark === ' ') column++;
		else if (mark === '\t') column += 8 - (column % 8);
		else break;
	}
	return column;
}
