/**
 * The password of everybody in the demonstration. It is printed at its start and stands in this file for all
 * to read, so it opens only while the server listens to this machine alone (people-service.ts), and nobody
 * may choose it.
 */
export const DEMO_PASSWORD = 'ebb and flood at Northmoor';
