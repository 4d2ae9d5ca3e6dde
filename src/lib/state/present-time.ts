/** This device's clock, ISO 8601 in UTC. */
export function presentTime(): string {
	return new Date().toISOString();
}
