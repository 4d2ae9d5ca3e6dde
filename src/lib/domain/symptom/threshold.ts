/** A number that decides whether a symptom is shown, with the reason for it; curators see it on the symptom's page. */
export interface Threshold {
	name: string;
	value: number;
	unit: string;
	why: string;
}
