/** A QR code as modules of one unit, and where it leads. */
export interface QrPicture {
	side: number;
	/** SVG path of the dark modules. */
	path: string;
	address: string;
}
