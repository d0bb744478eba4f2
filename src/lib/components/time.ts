const months = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

/** "14 Oct 2026" in UTC. Made without the locale, so that server and browser write the same. */
export function day(at: string): string {
	const time = new Date(at);
	return `${time.getUTCDate()} ${months[time.getUTCMonth()]} ${time.getUTCFullYear()}`;
}

/** "14 Oct 2026, 09:12 UTC". */
export function moment(at: string): string {
	return `${day(at)}, ${new Date(at).toISOString().slice(11, 16)} UTC`;
}

/** "12 min ago" within a day, the date beyond it. `now` in milliseconds since 1970. */
export function ago(at: string, now: number): string {
	const minutes = Math.floor((now - Date.parse(at)) / 60_000);
	if (minutes < 0 || minutes >= 24 * 60) return day(at);
	if (minutes < 1) return 'just now';
	return minutes < 60 ? `${minutes} min ago` : `${Math.floor(minutes / 60)} h ago`;
}
