/**
 * Pseudo-random numbers: xoshiro128++ (D. Blackman, S. Vigna, "Scrambled linear pseudorandom number generators", 2021),
 * in 32-bit operations. A stream belongs to a seed, an input and a stretch of trials; its 128-bit state comes from
 * MurmurHash3's 32-bit finaliser over these, so that streams are independent of the order in which they are used.
 */
export class Random {
	readonly #state = Int32Array.of(1, 2, 3, 4);
	#bits = new Uint32Array(0);

	/** Starts the stream of these whole numbers. */
	start(seed: number, stream: number, stretch: number): void {
		let hash = mix(mix(seed | 0, Math.floor(seed / 4294967296) | 0), 0x9e3779b9);
		hash = mix(mix(hash, stream), stretch);
		let any = 0;
		for (let i = 0; i < 4; i++) {
			hash = mix(hash, mix(stream + i, stretch ^ (seed | 0)));
			this.#state[i] = hash;
			any |= hash;
		}
		if (any === 0) this.#state[0] = 1;
	}

	/** Numbers between 0 and 1, neither of them included, on a grid of 2⁻³²: finer than any number of trials can show. */
	uniforms(into: Float64Array, count: number): void {
		const bits = this.#draw(count);
		for (let i = 0; i < count; i++) into[i] = (bits[i]! + 0.5) / 4294967296;
	}

	/**
	 * Standard normal numbers by the ziggurat of 128 layers (G. Marsaglia, W. W. Tsang, 2000), with separate bits for
	 * layer and place as in J. A. Doornik, "An improved ziggurat method", 2005.
	 */
	normals(into: Float64Array, count: number): void {
		const bits = this.#draw(2 * count);
		for (let i = 0; i < count; i++) {
			const first = bits[2 * i]!;
			const layer = first & 127;
			const place =
				((first >>> 7) * 134217728 + (bits[2 * i + 1]! >>> 5) + 0.5) / 2251799813685248 - 1;
			const z = place * edges[layer]!;
			into[i] = Math.abs(z) < edges[layer + 1]! ? z : this.#edge(layer, z);
		}
	}

	/** One number between 0 and 1. */
	uniform(): number {
		return ((this.#next() >>> 6) * 67108864 + (this.#next() >>> 6) + 0.5) / 4503599627370496;
	}

	/** One standard normal number. */
	normal(): number {
		const first = this.#next();
		const layer = first & 127;
		const z = (2 * this.uniform() - 1) * edges[layer]!;
		return Math.abs(z) < edges[layer + 1]! ? z : this.#edge(layer, z);
	}

	/** What is left of a layer beyond its inner rectangle: accepted, or drawn anew. */
	#edge(layer: number, z: number): number {
		if (layer === 0) {
			for (;;) {
				const x = -Math.log(this.uniform()) / tail;
				if (-2 * Math.log(this.uniform()) > x * x) return z < 0 ? -tail - x : tail + x;
			}
		}
		const [low, high] = [heights[layer]!, heights[layer + 1]!];
		if (low + this.uniform() * (high - low) < Math.exp(-0.5 * z * z)) return z;
		return this.normal();
	}

	#next(): number {
		const s = this.#state;
		const [s0, s3] = [s[0]!, s[3]!];
		const sum = (s0 + s3) | 0;
		const result = (((sum << 7) | (sum >>> 25)) + s0) >>> 0;
		const t = s[1]! << 9;
		s[2]! ^= s0;
		s[3]! ^= s[1]!;
		s[1]! ^= s[2]!;
		s[0]! ^= s[3]!;
		s[2]! ^= t;
		s[3] = (s[3]! << 11) | (s[3]! >>> 21);
		return result;
	}

	/** A run of 32-bit numbers, with the state kept in locals. */
	#draw(count: number): Uint32Array {
		if (this.#bits.length < count) this.#bits = new Uint32Array(count);
		const bits = this.#bits;
		let [s0, s1, s2, s3] = this.#state as unknown as [number, number, number, number];
		for (let i = 0; i < count; i++) {
			const sum = (s0 + s3) | 0;
			bits[i] = ((sum << 7) | (sum >>> 25)) + s0;
			const t = s1 << 9;
			s2 ^= s0;
			s3 ^= s1;
			s1 ^= s2;
			s0 ^= s3;
			s2 ^= t;
			s3 = (s3 << 11) | (s3 >>> 21);
		}
		this.#state.set([s0, s1, s2, s3]);
		return bits;
	}
}

function mix(hash: number, value: number): number {
	let h = (Math.imul(hash ^ value, 0x85ebca6b) + 0x9e3779b9) | 0;
	h ^= h >>> 16;
	h = Math.imul(h, 0x85ebca6b);
	h ^= h >>> 13;
	h = Math.imul(h, 0xc2b2ae35);
	return h ^ (h >>> 16);
}

/** Start of the tail and area of a layer, for 128 layers of equal area under exp(−x²/2). */
const tail = 3.442619855899;
const area = 9.91256303526217e-3;

/** Right edges of the layers, that of the base widened so that it has the same area, and exp(−x²/2) at each. */
const { edges, heights } = layers();

function layers() {
	const edges = new Float64Array(129);
	const heights = new Float64Array(129);
	edges[0] = area / Math.exp(-0.5 * tail * tail);
	edges[1] = tail;
	for (let i = 2; i < 128; i++)
		edges[i] = Math.sqrt(-2 * Math.log(area / edges[i - 1]! + Math.exp(-0.5 * edges[i - 1]! ** 2)));
	edges[128] = 0;
	for (let i = 0; i <= 128; i++) heights[i] = Math.exp(-0.5 * edges[i]! ** 2);
	return { edges, heights };
}
