import type { TextFormat } from './format-reader';
import { postgresJson } from './postgres-json';
import { postgresText } from './postgres-text';

/** Every format that is read as a whole text, in the order in which they are tried. */
export const TEXT_FORMATS: readonly TextFormat[] = [postgresJson, postgresText];
