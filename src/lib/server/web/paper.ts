import type { Paper } from '../paper/printing';

/** The paper that an address asks for: A4, or Letter with `?paper=letter`. */
export function paperOf({ searchParams }: URL): Paper {
	return searchParams.get('paper')?.toLowerCase() === 'letter' ? 'us-letter' : 'a4';
}

/** A PDF that the browser shows. */
export function pdf(bytes: Buffer, name: string): Response {
	return new Response(new Uint8Array(bytes), {
		headers: {
			'content-type': 'application/pdf',
			'content-disposition': `inline; filename="${name}.pdf"`,
			// Browsers show it by a plugin of their own, which the usual policy would keep away.
			'content-security-policy':
				"default-src 'none'; object-src 'self'; style-src 'unsafe-inline'; frame-ancestors 'none'",
		},
	});
}

/** The sealed record as a file to keep. */
export function sealedFile(text: string, name: string): Response {
	return new Response(text, {
		headers: {
			'content-type': 'application/json',
			'content-disposition': `attachment; filename="${name}.json"`,
		},
	});
}
