/** A string as CSS writes it: everything but letters, digits, spaces and plain marks is escaped by its code point. */
function quoted(text: string): string {
	return `"${text.replace(/[^\w ,.-]/gu, (sign) => `\\${sign.codePointAt(0)!.toString(16)} `)}"`;
}

/** Rules that print two texts and the page number at the foot of each page. */
export function pageFoot(left: string, middle: string): string {
	const font = 'font: 8pt "Fira Sans", sans-serif; color: #222;';
	return [
		`@page { @bottom-left { content: ${quoted(left)}; ${font} }`,
		`@bottom-center { content: ${quoted(middle)}; ${font} }`,
		`@bottom-right { content: "Page " counter(page) " of " counter(pages); ${font} } }`,
	].join(' ');
}
