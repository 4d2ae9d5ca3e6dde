/** Keys of the JSON form that hold a hyphen or a slash of their own; XML tags have hyphens for every mark. */
const WITH_MARKS = [
	'One-Time Filter',
	'Full-sort Groups',
	'Pre-sorted Groups',
	'I/O Read Time',
	'I/O Write Time',
	'Temp I/O Read Time',
	'Temp I/O Write Time',
	'Shared I/O Read Time',
	'Shared I/O Write Time',
	'Local I/O Read Time',
	'Local I/O Write Time'
];
const BY_TAG = new Map(WITH_MARKS.map((key) => [key.replace(/[ /]/g, '-'), key]));

/** The key of the JSON form for a tag of the XML form: "Rows-Removed-by-Filter" is "Rows Removed by Filter". */
export function keyOfTag(tag: string): string {
	return BY_TAG.get(tag) ?? tag.replaceAll('-', ' ');
}
