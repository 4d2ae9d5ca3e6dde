import { JSDOM } from 'jsdom';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { allowLink } from '$lib/server/markdown/links';
import { render } from '$lib/server/markdown/render';

/** Payloads of the kinds listed in the OWASP cross-site scripting filter evasion cheat sheet. */
const PAYLOADS = [
	'<script>globalThis.hit = 1</script>',
	'<img src=x onerror=globalThis.hit=1>',
	'<svg onload=globalThis.hit=1>',
	'<svg><script>globalThis.hit=1</script></svg>',
	'<math><mi xlink:href="javascript:globalThis.hit=1">x</mi></math>',
	'<iframe srcdoc="<script>parent.hit=1</script>"></iframe>',
	'<a href="javascript:globalThis.hit=1">x</a>',
	'[x](javascript:globalThis.hit=1)',
	'[x](JaVaScRiPt:globalThis.hit=1)',
	'[x](java&#115;cript:globalThis.hit=1)',
	'[x](java&#x0A;script:globalThis.hit=1)',
	'[x](&#x6A;avascript:globalThis.hit=1)',
	'[x](data:text/html;base64,PHNjcmlwdD5oaXQ9MTwvc2NyaXB0Pg==)',
	'[x](vbscript:hit)',
	'[x](<javascript:globalThis.hit=1>)',
	'<javascript:globalThis.hit=1>',
	'![x](javascript:globalThis.hit=1)',
	'![x](https://elsewhere.example/pixel.png)',
	'![" onerror="globalThis.hit=1](x)',
	'[x](https://a.example "onmouseover=globalThis.hit=1 title=")',
	'[x](https://a.example/"onmouseover="globalThis.hit=1)',
	'```"><script>globalThis.hit=1</script>\ncode\n```',
	'`<script>globalThis.hit=1</script>`',
	'# <img src=x onerror=globalThis.hit=1>',
	'| a |\n|---|\n| <img src=x onerror=globalThis.hit=1> |',
	'- [ ] <input autofocus onfocus=globalThis.hit=1>',
	'<details open ontoggle=globalThis.hit=1>',
	'<style>@import "https://elsewhere.example/x.css";</style>',
	'<link rel=stylesheet href=https://elsewhere.example/x.css>',
	'<form action=https://elsewhere.example><button>x</button></form>',
	'<base href=https://elsewhere.example/>',
	'<meta http-equiv=refresh content="0;url=https://elsewhere.example">',
	'<object data="data:text/html,<script>parent.hit=1</script>"></object>',
	'<template><script>globalThis.hit=1</script></template>',
	'<noscript><p title="</noscript><img src=x onerror=globalThis.hit=1>"></noscript>',
	'<form><math><mtext></form><form><mglyph><style></math><img src onerror=globalThis.hit=1>',
	'<p id=cookie name=body style="position:fixed">x</p>',
	'<!--<img src="--><img src=x onerror=globalThis.hit=1>//">',
	'[ref]\n\n[ref]: javascript:globalThis.hit=1',
	'[x](//elsewhere.example)',
	'[x](/\\elsewhere.example)'
];

function elementsOf(html: string): Element[] {
	return [...new JSDOM(html).window.document.body.querySelectorAll('*')];
}

const UNWANTED =
	/^(SCRIPT|IMG|SVG|IFRAME|MATH|STYLE|LINK|FORM|INPUT|BUTTON|BASE|META|OBJECT|TEMPLATE|NOSCRIPT|DETAILS)$/i;
const ATTRIBUTES = ['href', 'title', 'rel', 'start', 'align'];
const HREF = /^(https?:|mailto:|#|\/(?![/\\]))/;

/** Elements and attributes that Markdown cannot make, and addresses that may not be followed. */
function offencesOf(html: string): string[] {
	return elementsOf(html).flatMap((element) => [
		...(UNWANTED.test(element.tagName) ? [element.tagName] : []),
		...[...element.attributes].map(({ name }) => name).filter((name) => !ATTRIBUTES.includes(name)),
		...[element.getAttribute('href')].filter((href) => href !== null && !HREF.test(href))
	]) as string[];
}

describe('render', () => {
	it.each(PAYLOADS)('lets nothing of this through: %s', (payload) => {
		expect(offencesOf(render(payload))).toEqual([]);
	});

	it('runs nothing when what it made is drawn by a browser that runs scripts', () => {
		const { window } = new JSDOM(PAYLOADS.map((payload) => render(payload)).join('\n'), {
			runScripts: 'dangerously'
		});
		expect(Reflect.get(window, 'hit')).toBeUndefined();
	});

	it('shows raw HTML as the text that it is', () => {
		expect(render('a <b>bold</b> title')).toBe('<p>a &lt;b&gt;bold&lt;/b&gt; title</p>\n');
	});

	it('never lets an element through that Markdown cannot make, whatever the text', () => {
		fc.assert(
			fc.property(
				fc.array(fc.constantFrom(...PAYLOADS, '*', '`', '\n', '>', '- ', '[', '](', ')', '"', '&lt;')),
				(parts) => {
					expect(offencesOf(render(parts.join('')))).toEqual([]);
				}
			),
			{ numRuns: 60 }
		);
	});

	it('keeps what Markdown means', () => {
		const html = render(
			'Estimate **off** by `750`:\n\n1. look\n2. act\n\n> said\n\n| a | b |\n|---|--:|\n| 1 | 2 |\n\n```sql\nselect 1 < 2;\n```'
		);
		expect(html).toContain('<strong>off</strong>');
		expect(html).toContain('<code>750</code>');
		expect(html).toContain('<li>look</li>');
		expect(html).toContain('<blockquote>');
		expect(html).toContain('<td align="right">2</td>');
		expect(html).toContain('<pre><code>select 1 &lt; 2;\n</code></pre>');
	});

	it('puts the highest heading under the page’s own, and keeps the order', () => {
		expect(render('## Before\n\n### First')).toBe('<h3>Before</h3>\n<h4>First</h4>\n');
		expect(render('# Before\n\n###### Deep', { topHeading: 4 })).toBe('<h4>Before</h4>\n<h6>Deep</h6>\n');
	});

	it('keeps links to our own pages and to the outside, without a referrer', () => {
		expect(render('[refresh](/runbooks/refresh)')).toContain(
			'<a href="/runbooks/refresh" rel="noopener noreferrer nofollow">refresh</a>'
		);
		expect(render('<https://manual.example/x>')).toContain('href="https://manual.example/x"');
	});

	it('says an image by its description', () => {
		expect(render('![the gauge](https://elsewhere.example/x.png)')).toBe('<p>the gauge</p>\n');
	});
});

describe('allowLink', () => {
	it.each([
		'javascript:x',
		' java\tscript:x',
		'\u0001javascript:x',
		'data:x',
		'file:///x',
		'//host',
		'/\\host',
		'x',
		''
	])('refuses %j', (href) => {
		expect(allowLink(href)).toBeNull();
	});
	it.each(['/incidents/412', '#step-2', 'https://x.example', 'mailto:a@x.example'])('allows %j', (href) => {
		expect(allowLink(href)).toBe(href);
	});
});
