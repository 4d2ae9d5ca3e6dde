import type { Part } from '../call';

/** The field that carries files, on every call that takes some. */
export const evidencePart: Part = {
	name: 'evidence',
	kind: 'files',
	what: 'Plans, logs, pictures; as many as wanted, each a file.',
	required: true
};
