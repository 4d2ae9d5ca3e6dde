import { describe, expect, it } from 'vitest';
import { orderIncidents } from '$lib/domain/watch/order-incidents';

const ilse = { id: 1, name: 'Ilse Marten' };

describe('orderIncidents', () => {
	it('puts what nobody has taken before what somebody is on, even where that is worse', () => {
		const taken = { number: 1, owner: ilse, severity: 1, since: '2026-12-01T00:00:00Z' } as const;
		const free = { number: 2, owner: null, severity: 3, since: '2026-12-01T01:00:00Z' } as const;
		expect(orderIncidents([taken, free]).map((incident) => incident.number)).toEqual([2, 1]);
	});

	it('orders by severity and then by age', () => {
		const at = (number: number, severity: 1 | 2 | 3 | 4, since: string) => ({
			number,
			owner: null,
			severity,
			since
		});
		const mixed = [
			at(1, 3, '2026-11-01T00:00:00Z'),
			at(2, 2, '2026-12-01T02:00:00Z'),
			at(3, 2, '2026-12-01T01:00:00Z')
		];
		expect(orderIncidents(mixed).map((incident) => incident.number)).toEqual([3, 2, 1]);
	});

	it('leaves the list that it was given as it was', () => {
		const given = [
			{ number: 2, owner: null, severity: 4, since: '2026-12-01T02:00:00Z' } as const,
			{ number: 1, owner: null, severity: 1, since: '2026-12-01T02:00:00Z' } as const
		];
		orderIncidents(given);
		expect(given.map((incident) => incident.number)).toEqual([2, 1]);
	});
});
