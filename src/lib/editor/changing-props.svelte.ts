/** Props of a mounted component that change in place: it renders anew only what differs. */
export interface ChangingProps<Props extends Record<string, unknown>> {
	readonly props: Props;
	/** Gives the component other values of the same props. */
	change(next: Props): void;
}

export function changingProps<Props extends Record<string, unknown>>(
	first: Props,
): ChangingProps<Props> {
	let current = $state.raw(first);
	const props: Props = { ...first };
	for (const name of Object.keys(first)) {
		Object.defineProperty(props, name, { enumerable: true, get: () => current[name] });
	}
	return { props, change: (next) => (current = next) };
}
