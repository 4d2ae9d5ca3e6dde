import { describe, expect, it } from 'vitest';
import { writeSetting } from '../../../../src/routes/(app)/gauge/setting-statement';

describe('writeSetting', () => {
	it('has no statement for an engine whose sessions have no such setting', () => {
		expect(writeSetting('showplan', { name: 'grant', valueKb: 1024 })).toBeNull();
	});

	// PostgreSQL manual 15, section 20.1.1: a quoted number with kB, MB or GB.
	it('never writes less than what is needed', () => {
		expect(writeSetting('postgresql', { name: 'work_mem', valueKb: 14436 })).toBe("SET work_mem = '15MB';");
		expect(writeSetting('postgresql', { name: 'work_mem', valueKb: 2785.2 })).toBe(
			"SET work_mem = '2786kB';"
		);
	});

	// MariaDB manual, sort_buffer_size: bytes, SET SESSION.
	it('writes bytes where the engine counts in bytes', () => {
		expect(writeSetting('mariadb', { name: 'sort_buffer_size', valueKb: 2048 })).toBe(
			'SET SESSION sort_buffer_size = 2097152;'
		);
	});
});
