import { Validator } from '@seriousme/openapi-schema-validator';
import { describe, expect, it } from 'vitest';
import { describeApi } from '$lib/server/api/openapi';

describe('describeApi', () => {
	it('is a document of OpenAPI 3.1 that a validator accepts', async () => {
		const result = await new Validator().validate(structuredClone(describeApi()));
		expect(result.errors ?? []).toEqual([]);
		expect(result.valid).toBe(true);
	});
});
