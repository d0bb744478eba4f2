/** A program of the typesetter's, bundled as its text. */
declare module '*.typ' {
	const source: string;
	export default source;
}
