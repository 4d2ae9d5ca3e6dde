import { applyAction } from '$app/forms';
import { invalidateAll } from '$app/navigation';
import type { SubmitFunction } from '@sveltejs/kit';

interface Options {
	/** Afterwards, with the page's new data drawn. */
	done?: (form: HTMLFormElement) => void;
}

/**
 * For use:enhance on forms whose action answers with a redirect to the page that they stand on: the page draws its
 * new data and stays where it is. A refusal is shown; where the thing was changed meanwhile, with what stands now.
 */
export function inPlace(options: Options = {}): SubmitFunction {
	return () =>
		async ({ result, formElement }) => {
			const here = location.pathname;
			if (result.type === 'redirect' && new URL(result.location, location.href).pathname === here) {
				formElement.reset();
				// Clears what an earlier try was refused for.
				await applyAction({ type: 'success', status: 200 });
				await invalidateAll();
				options.done?.(formElement);
				return;
			}
			await applyAction(result);
			if (result.type === 'failure') await invalidateAll();
		};
}
