import { mount, unmount } from 'svelte';
import FactCard from './FactCard.svelte';
import type { Fact } from './facts';
import type { NoteContext } from './note-context';

/** What is known of a word, in a node for an editor to show; with the note it leads to where the name is defined. */
export function cardOf(fact: Fact, note?: NoteContext): { dom: HTMLElement; destroy: () => void } {
	const { definition } = fact;
	const ongo = note && definition ? () => note.go(definition) : undefined;
	const dom = document.createElement('div');
	const instance = mount(FactCard, { target: dom, props: { fact, ongo } });
	return { dom, destroy: () => void unmount(instance) };
}
