import type { StreamFormat, TextFormat } from './format-reader';
import { postgresCsvlog } from './postgres-csvlog';
import { postgresJsonlog } from './postgres-jsonlog';
import { postgresJson } from './postgres-json';
import { postgresLog } from './postgres-log';
import { postgresText } from './postgres-text';
import { postgresXml } from './postgres-xml';
import { postgresYaml } from './postgres-yaml';

/** Formats that are read as they come in; tried first, for a log may hold plans of every form. */
export const STREAM_FORMATS: readonly StreamFormat[] = [postgresJsonlog, postgresCsvlog, postgresLog];

/** Formats that are read as a whole text, in the order in which they are tried. */
export const TEXT_FORMATS: readonly TextFormat[] = [postgresJson, postgresXml, postgresYaml, postgresText];
