import { deserialize } from '$app/forms';
import type { StepView } from '$lib/components/runbook/step-view';

/** An unsaved text as the server drew it, with what keeps it from being published. */
export interface Preview {
	introductionHtml: string;
	steps: StepView[];
	remarksHtml: string;
	reasons: string[];
}

/** How long typing has to pause. */
const PAUSE_MS = 600;

/** Asks the server to draw the form's text whenever typing pauses; the newest question wins. */
export class LivePreview {
	/** The last drawing; null: none was made here yet. */
	drawn = $state.raw<Preview | null>(null);
	/** Why the last question has no answer; null: it has one. */
	broken = $state<string | null>(null);
	#timer: ReturnType<typeof setTimeout> | undefined;
	#asking: AbortController | null = null;

	/** Asks after the next pause. */
	ask(form: HTMLFormElement): void {
		clearTimeout(this.#timer);
		this.#timer = setTimeout(() => void this.#send(form), PAUSE_MS);
	}

	/** Stops what is under way: the page is left. */
	stop(): void {
		clearTimeout(this.#timer);
		this.#asking?.abort();
	}

	async #send(form: HTMLFormElement): Promise<void> {
		this.#asking?.abort();
		const asking = new AbortController();
		this.#asking = asking;
		try {
			const response = await fetch('?/preview', {
				method: 'POST',
				body: new FormData(form),
				headers: { accept: 'application/json', 'x-sveltekit-action': 'true' },
				signal: asking.signal
			});
			const result = deserialize<{ preview: Preview }, { problem: { detail: string } }>(
				await response.text()
			);
			if (result.type === 'success' && result.data) {
				this.drawn = result.data.preview;
				this.broken = null;
			} else if (result.type === 'failure') this.broken = result.data?.problem.detail ?? null;
			else this.broken = 'The preview could not be drawn; what you type is kept on this device.';
		} catch (error) {
			// A newer question took its place, or the network is down: typing goes on.
			if (asking.signal.aborted) return;
			this.broken = `The server can't be reached (${error instanceof Error ? error.message : 'no answer'}); what you type is kept on this device.`;
		}
	}
}
