import { WidgetType, type EditorView } from '@codemirror/view';
import { mount, unmount, type Component } from 'svelte';
import { changingProps } from './changing-props.svelte';

/** What became of a DOM node: the component in it and what it stands for. */
interface Mounted {
	instance: Record<string, unknown>;
	component: unknown;
	key: string;
	change: (props: Record<string, unknown>) => void;
}

const mounted = new WeakMap<HTMLElement, Mounted>();

interface Choices<Props extends Record<string, unknown>> {
	component: Component<Props>;
	props: (view: EditorView) => Props;
	/** What the widget stands for; only a widget of the same key takes over its place in the page. */
	key: string;
	/** All it shows; equal texts are equal widgets. */
	text: string;
	className?: string;
	block?: boolean;
	/** Keeps mouse and keys inside from the editor; a widget with buttons needs it. */
	ownEvents?: boolean;
	/** Called when a widget takes the place of one that showed something else. */
	onchange?: (dom: HTMLElement) => void;
}

/** A widget that shows a Svelte component, the same one that static cells show. */
export class MountedWidget<Props extends Record<string, unknown>> extends WidgetType {
	choices: Choices<Props>;
	/** Where it stands while it is drawn. */
	#place: { dom: HTMLElement; view: EditorView } | undefined;
	#sizes: ResizeObserver | undefined;

	constructor(choices: Choices<Props>) {
		super();
		this.choices = choices;
	}

	/** Shows what another widget of the same key would, without an update of the editor. */
	become(next: MountedWidget<Props>): void {
		if (this.eq(next)) return;
		this.choices = next.choices;
		if (this.#place) this.updateDOM(this.#place.dom, this.#place.view);
	}

	override eq(other: MountedWidget<Props>): boolean {
		return other.choices.key === this.choices.key && other.choices.text === this.choices.text;
	}

	override toDOM(view: EditorView): HTMLElement {
		const dom = document.createElement(this.choices.block ? 'div' : 'span');
		if (this.choices.className) dom.className = this.choices.className;
		this.#fill(dom, view);
		return dom;
	}

	override updateDOM(dom: HTMLElement, view: EditorView): boolean {
		const before = mounted.get(dom);
		const { component, key } = this.choices;
		if (before?.key !== key || before.component !== component) return false;
		before.change(this.choices.props(view));
		this.#place = { dom, view };
		this.choices.onchange?.(dom);
		return true;
	}

	override destroy(dom: HTMLElement): void {
		const before = mounted.get(dom);
		if (!before) return;
		if (this.#place?.dom === dom) this.#place = undefined;
		this.#sizes?.disconnect();
		mounted.delete(dom);
		void unmount(before.instance);
		dom.replaceChildren();
	}

	override ignoreEvent(): boolean {
		return this.choices.ownEvents ?? false;
	}

	#fill(dom: HTMLElement, view: EditorView): void {
		const { component, props, key } = this.choices;
		const changing = changingProps(props(view));
		const instance = mount(component, { target: dom, props: changing.props });
		const change = (next: Record<string, unknown>) => changing.change(next as Props);
		mounted.set(dom, { instance, component, key, change });
		this.#place = { dom, view };
		if (!this.choices.block) return;
		// The editor must know how high its blocks are, also when they grow.
		this.#sizes = new ResizeObserver(() => view.requestMeasure());
		this.#sizes.observe(dom);
	}
}
