interface Events {
	/** The page is about to be left. */
	onLeaving: (event: BeforeUnloadEvent) => void;
	/** The browser's network came or went. */
	onNetwork: () => void;
}

/** Listens to the page's window, where there is one; returns what ends that. */
export function watchWindow({ onLeaving, onNetwork }: Events): () => void {
	if (typeof window === 'undefined') return () => undefined;
	window.addEventListener('beforeunload', onLeaving);
	window.addEventListener('offline', onNetwork);
	window.addEventListener('online', onNetwork);
	return () => {
		window.removeEventListener('beforeunload', onLeaving);
		window.removeEventListener('offline', onNetwork);
		window.removeEventListener('online', onNetwork);
	};
}
