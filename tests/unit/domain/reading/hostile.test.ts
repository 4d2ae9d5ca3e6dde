import { describe, expect, test } from 'vitest';
import { mask, read } from '../../../fixtures/evidence-files';

const SIZE = 60_000;
const filling = (text: string) => text.repeat(Math.ceil(SIZE / text.length));

/** How each format begins; what follows is made to hurt. */
const beginnings = {
	text: 'Seq Scan on a  (cost=0.00..1.00 rows=1 width=4)\n  Filter: ',
	json: '[{"Plan": {"Node Type": "Seq Scan", "Filter": "',
	yaml: '- Plan: \n    Node Type: "Seq Scan"\n    Filter: "',
	xml: '<explain xmlns="http://www.postgresql.org/2009/explain"><Query><Plan><Node-Type>Seq Scan</Node-Type><Filter>',
	log: '2026-01-01 00:00:00 UTC [1] LOG:  x\n2026-01-01 00:00:00 UTC [1] STATEMENT:  ',
	csvlog: '2026-01-01 00:00:00.000 UTC,"u","d",1,"[local]",6b0e4724.1,1,"',
	jsonlog: '{"timestamp":"2026-01-01 00:00:00.000 UTC","pid":1,"error_severity":"ERROR","message":"',
	nothing: ''
};
/** Each made some pattern or list cost its square before. */
const hurting = [
	' ',
	'\n',
	'\t',
	'(',
	"'",
	'"',
	'\\',
	'a',
	'9',
	'a.',
	'a:',
	':  ',
	'a@',
	'-',
	'> ',
	'?,',
	'(1,',
	'/*',
	'{"a":',
	'[',
	'<a>',
	'&amp;',
	'a=',
	'password',
	'http://',
	'  ->  Sort\n',
	'- ',
	'user=a,',
	'SELECT ',
	'a:b:',
	'1.1.',
	'eyJ'
];

describe('evidence made to hurt', () => {
	// A square would take minutes here; the ordinary time limit of a test is what fails it.
	test.each(Object.entries(beginnings))(
		'is read and masked behind the beginning of %s',
		async (_format, beginning) => {
			for (const text of hurting) {
				const evidence = beginning + filling(text);
				expect((await read(evidence)).length).toBeGreaterThan(0);
				const masked = await mask(evidence);
				expect(await mask(masked)).toBe(masked);
			}
		}
	);
});
