import { render, screen, waitFor } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import TextEditor from '$lib/components/runbook/TextEditor.svelte';

describe('TextEditor', () => {
	it('is a plain field with its label until the editor is there, and keeps the text in it after', async () => {
		const { container, rerender } = render(TextEditor, {
			label: 'Text',
			name: 'body',
			value: '### 1. Look (check)'
		});
		const field = container.querySelector('textarea');
		expect(field?.hidden).toBe(false);
		expect(screen.getByLabelText('Text')).toBe(field);
		await waitFor(() => expect(container.querySelector('.cm-content')).not.toBeNull(), { timeout: 10_000 });
		const editor = container.querySelector('.cm-content');
		expect(editor?.getAttribute('aria-label')).toBe('Text');
		expect(editor?.getAttribute('role')).toBe('textbox');
		expect(editor?.textContent).toContain('### 1. Look (check)');
		await waitFor(() => expect(field?.hidden).toBe(true));
		await rerender({ value: 'Another text' });
		await waitFor(() => expect(editor?.textContent).toBe('Another text'));
		expect(field?.value).toBe('Another text');
	});

	it('tells the words of a statement from the text round it', async () => {
		const value = 'Read **this** first.\n\n```sql\nselect 1;\n```\n';
		const { container } = render(TextEditor, { label: 'Text', name: 'body', value });
		const words = () => [...container.querySelectorAll('.cm-line span')].map((span) => span.textContent);
		await waitFor(() => expect(words()).toContain('select'), { timeout: 10_000 });
		expect(words()).toContain('this');
	});
});
