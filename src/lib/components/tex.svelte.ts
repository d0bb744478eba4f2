import type { render } from './tex-html';

/** HTML of a formula in TeX, on a line of its own or within one; undefined where it cannot be set. */
export type Typeset = (tex: string, ownLine: boolean) => string | undefined;

/** On the server it is there at once, so that a page has its formulas without a script. */
const atOnce = import.meta.env.SSR ? (await import('./tex-html')).render : undefined;

let loaded = $state.raw<typeof render | undefined>(atOnce);
let loading: Promise<void> | undefined;

/** Sets formulas; undefined until what does so is loaded, which begins when it is asked for first. */
export function typesetter(): Typeset | undefined {
	if (!loaded) {
		loading ??= import('./tex-html').then(
			(tex) => void (loaded = tex.render),
			() => (loading = undefined),
		);
	}
	return loaded;
}
