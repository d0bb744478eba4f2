/** A file packed with gzip, where the browser can: a long note's revision is then small enough to be sent. */
export async function packed(file: File): Promise<File> {
	if (!('CompressionStream' in globalThis) || file.name.endsWith('.gz')) return file;
	const stream = file.stream().pipeThrough(new CompressionStream('gzip'));
	return new File([await new Response(stream).blob()], `${file.name}.gz`);
}
