/** Where the page's own host lets pages onto the sockets of notes; undefined where there is no page. */
export function syncAddress(): string | undefined {
	if (typeof location === 'undefined') return undefined;
	return `${location.protocol === 'https:' ? 'wss' : 'ws'}://${location.host}/sync`;
}
