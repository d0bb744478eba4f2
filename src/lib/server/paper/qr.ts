import { encode } from 'uqr';

/** A QR code as modules of one unit: the side of the square, and the path of the dark ones. */
export interface QrCode {
	side: number;
	path: string;
}

/** The QR code of an address (ISO/IEC 18004), with error correction M and no margin. */
export function qrOf(address: string): QrCode {
	const { size, data } = encode(address, { border: 0, ecc: 'M' });
	const dark = data.flatMap((row, y) =>
		row.flatMap((isDark, x) => (isDark ? [`M${x} ${y}h1v1h-1z`] : [])),
	);
	return { side: size, path: dark.join('') };
}

/** The same as a picture. */
export function qrSvg(address: string): string {
	const { side, path } = qrOf(address);
	return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${side} ${side}"><path d="${path}" fill="#14211f"/></svg>`;
}
