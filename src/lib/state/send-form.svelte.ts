import { deserialize } from '$app/forms';
import type { ActionResult } from '@sveltejs/kit';

/** Sends a form with files to a form action, with the bytes that have gone; fetch cannot tell those. */
export class FormSending {
	/** null: nothing is under way. */
	sentBytes = $state<number | null>(null);
	totalBytes = $state(0);
	#request: XMLHttpRequest | null = null;

	get busy(): boolean {
		return this.sentBytes !== null;
	}

	/** The action's answer; null: stopped, or the connection broke. */
	send(action: string, body: FormData): Promise<ActionResult | null> {
		this.stop();
		const request = new XMLHttpRequest();
		this.#request = request;
		this.sentBytes = 0;
		this.totalBytes = 0;
		return new Promise((resolve) => {
			const end = (result: ActionResult | null) => {
				if (this.#request !== request) return resolve(null);
				this.#request = null;
				this.sentBytes = null;
				resolve(result);
			};
			request.upload.addEventListener('progress', (event) => {
				this.sentBytes = event.loaded;
				this.totalBytes = event.total;
			});
			request.addEventListener('load', () => end(readResult(request)));
			for (const type of ['error', 'abort', 'timeout']) request.addEventListener(type, () => end(null));
			request.open('POST', action);
			request.setRequestHeader('accept', 'application/json');
			request.setRequestHeader('x-sveltekit-action', 'true');
			request.send(body);
		});
	}

	/** Stops the sending under way. */
	stop(): void {
		this.#request?.abort();
		this.#request = null;
		this.sentBytes = null;
	}
}

function readResult(request: XMLHttpRequest): ActionResult {
	try {
		return deserialize(request.responseText);
	} catch (cause) {
		// Something between the browser and the application answered in its place.
		const message = `The server answered ${request.status} and no more.`;
		return { type: 'error', status: request.status, error: new Error(message, { cause }) };
	}
}
