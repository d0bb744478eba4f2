interface Events {
	/** The page is about to be left. */
	onLeaving: (event: BeforeUnloadEvent) => void;
	/** The page is out of sight, and may be closed without another word. */
	onHidden: () => void;
	/** The browser's network came or went. */
	onNetwork: () => void;
}

/** Listens to the page's window, where there is one; returns what ends that. */
export function watchWindow({ onLeaving, onHidden, onNetwork }: Events): () => void {
	if (typeof window === 'undefined') return () => undefined;
	const ending = new AbortController();
	const { signal } = ending;
	window.addEventListener('beforeunload', onLeaving, { signal });
	window.addEventListener('pagehide', onHidden, { signal });
	document.addEventListener('visibilitychange', () => document.hidden && onHidden(), { signal });
	window.addEventListener('offline', onNetwork, { signal });
	window.addEventListener('online', onNetwork, { signal });
	return () => ending.abort();
}
