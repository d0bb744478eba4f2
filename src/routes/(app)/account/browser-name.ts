// The order matters: Edge and Chrome also call themselves by the names that follow.
const browsers: [RegExp, string][] = [
	[/Edg\//, 'Edge'],
	[/Firefox\//, 'Firefox'],
	[/Chrom(e|ium)\//, 'Chrome or Chromium'],
	[/Safari\//, 'Safari'],
];
const systems: [RegExp, string][] = [
	[/Android/, 'Android'],
	[/iPhone|iPad/, 'iOS'],
	[/Windows/, 'Windows'],
	[/Mac OS X/, 'macOS'],
	[/Linux/, 'Linux'],
];

/** A user agent header in words: "Firefox on Linux". */
export function browserOf(userAgent: string | null): string {
	const header = userAgent ?? '';
	const browser = browsers.find(([pattern]) => pattern.test(header))?.[1];
	const system = systems.find(([pattern]) => pattern.test(header))?.[1];
	if (!browser) return 'Another program';
	return system ? `${browser} on ${system}` : browser;
}
