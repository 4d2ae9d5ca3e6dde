/** The look of everything one types or chooses in; its words come from FieldFrame. */
export const CONTROL =
	'block w-full min-h-target rounded border border-edge bg-sheet px-2.5 py-1 text-ink ' +
	'disabled:bg-silt disabled:text-ink2 aria-invalid:border-2 aria-invalid:border-flood';

/** What the frame tells the control inside it, to be spread on it. */
export interface ControlWire {
	id: string;
	name: string;
	'aria-describedby': string | undefined;
	'aria-invalid': 'true' | undefined;
}
