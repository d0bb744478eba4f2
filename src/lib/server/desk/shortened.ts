const most = 90;

/** The beginning of what somebody wrote, on one line, cut between words. */
export function shortened(text: string): string {
	const line = text.replace(/\s+/g, ' ').trim();
	if (line.length <= most) return line;
	const cut = line.slice(0, most);
	const end = cut.lastIndexOf(' ');
	return `${cut.slice(0, end > most / 2 ? end : most)} …`;
}
