/** SHA-256 (FIPS 180-4) of a byte string, synchronously in every engine: seeds and record hashes must not wait. */

const roundConstants = new Uint32Array(64);
const initial = new Uint32Array(8);

// First 32 bits of the fractional parts of the cube and square roots of the first primes (FIPS 180-4, 4.2.2, 5.3.3),
// by whole-number arithmetic.
{
	const root = (value: bigint, cube: boolean): bigint => {
		let low = 0n;
		let high = 1n << 60n;
		while (low < high) {
			const middle = (low + high + 1n) >> 1n;
			if ((cube ? middle * middle * middle : middle * middle) <= value) low = middle;
			else high = middle - 1n;
		}
		return low;
	};
	let count = 0;
	for (let candidate = 2; count < 64; candidate++) {
		let prime = true;
		for (let divisor = 2; divisor * divisor <= candidate; divisor++) {
			if (candidate % divisor === 0) prime = false;
		}
		if (!prime) continue;
		roundConstants[count] = Number(root(BigInt(candidate) << 96n, true) & 0xffffffffn);
		if (count < 8) initial[count] = Number(root(BigInt(candidate) << 64n, false) & 0xffffffffn);
		count++;
	}
}

const schedule = new Int32Array(64);

function compress(state: Uint32Array, bytes: Uint8Array, offset: number): void {
	const w = schedule;
	for (let i = 0; i < 16; i++) {
		const j = offset + 4 * i;
		w[i] =
			((bytes[j] as number) << 24) |
			((bytes[j + 1] as number) << 16) |
			((bytes[j + 2] as number) << 8) |
			(bytes[j + 3] as number);
	}
	for (let i = 16; i < 64; i++) {
		const x = w[i - 15] as number;
		const y = w[i - 2] as number;
		const s0 = ((x >>> 7) | (x << 25)) ^ ((x >>> 18) | (x << 14)) ^ (x >>> 3);
		const s1 = ((y >>> 17) | (y << 15)) ^ ((y >>> 19) | (y << 13)) ^ (y >>> 10);
		w[i] = ((w[i - 16] as number) + s0 + (w[i - 7] as number) + s1) | 0;
	}
	let a = state[0] as number;
	let b = state[1] as number;
	let c = state[2] as number;
	let d = state[3] as number;
	let e = state[4] as number;
	let f = state[5] as number;
	let g = state[6] as number;
	let h = state[7] as number;
	for (let i = 0; i < 64; i++) {
		const s1 = ((e >>> 6) | (e << 26)) ^ ((e >>> 11) | (e << 21)) ^ ((e >>> 25) | (e << 7));
		const t1 = (h + s1 + ((e & f) ^ (~e & g)) + (roundConstants[i] as number) + (w[i] as number)) | 0;
		const s0 = ((a >>> 2) | (a << 30)) ^ ((a >>> 13) | (a << 19)) ^ ((a >>> 22) | (a << 10));
		const t2 = (s0 + ((a & b) ^ (a & c) ^ (b & c))) | 0;
		h = g;
		g = f;
		f = e;
		e = (d + t1) | 0;
		d = c;
		c = b;
		b = a;
		a = (t1 + t2) | 0;
	}
	state[0] = (state[0] as number) + a;
	state[1] = (state[1] as number) + b;
	state[2] = (state[2] as number) + c;
	state[3] = (state[3] as number) + d;
	state[4] = (state[4] as number) + e;
	state[5] = (state[5] as number) + f;
	state[6] = (state[6] as number) + g;
	state[7] = (state[7] as number) + h;
}

/** The digest as eight 32-bit words, most significant first. */
export function sha256Words(bytes: Uint8Array): Uint32Array {
	const state = Uint32Array.from(initial);
	const whole = bytes.length - (bytes.length % 64);
	for (let offset = 0; offset < whole; offset += 64) compress(state, bytes, offset);
	const rest = bytes.length - whole;
	const tail = new Uint8Array(rest < 56 ? 64 : 128);
	tail.set(bytes.subarray(whole));
	tail[rest] = 0x80;
	const bits = bytes.length * 8;
	const view = new DataView(tail.buffer);
	view.setUint32(tail.length - 8, Math.floor(bits / 4294967296));
	view.setUint32(tail.length - 4, bits >>> 0);
	for (let offset = 0; offset < tail.length; offset += 64) compress(state, tail, offset);
	return state;
}

const encoder = new TextEncoder();

/** SHA-256 of a text in UTF-8, as 64 lower-case hex digits. */
export function sha256Hex(text: string): string {
	return Array.from(sha256Words(encoder.encode(text)), (word) => word.toString(16).padStart(8, '0')).join('');
}

/** Four words that seed one stream. */
export function streamSeed(text: string): Uint32Array {
	return sha256Words(encoder.encode(text)).subarray(0, 4);
}
