import { exp, ln } from '../../exact';
import { streamSeed } from '../../exact/sha256';
import { density, edge, tailStart } from './ziggurat-tables';

const unit53 = 1.1102230246251565e-16; // 2^-53
const unit55 = 2.7755575615628914e-17; // 2^-55

/**
 * One stream of random numbers: xoshiro128** (Blackman & Vigna 2021, ACM TOMS 47, 36), its state taken from the
 * SHA-256 of a text that names seed, input and block. Streams are independent of the order in which they are used.
 */
export class Stream {
	private a: number;
	private b: number;
	private c: number;
	private d: number;

	constructor(name: string) {
		const seed = streamSeed(name);
		this.a = (seed[0] as number) | 0;
		this.b = (seed[1] as number) | 0;
		this.c = (seed[2] as number) | 0;
		// All zero is the one state that the generator cannot leave.
		this.d = (seed[3] as number) | 0 || 1;
	}

	/** The next word, as a signed 32-bit integer. */
	word(): number {
		const { a, b, c, d } = this;
		const x = Math.imul(b, 5);
		const c2 = c ^ a;
		const d2 = d ^ b;
		this.b = b ^ c2;
		this.a = a ^ d2;
		this.c = c2 ^ (b << 9);
		this.d = (d2 << 11) | (d2 >>> 21);
		return Math.imul((x << 7) | (x >>> 25), 9);
	}

	/** One number strictly between 0 and 1, in steps of 2^-53. */
	uniform(): number {
		const high = this.word() >>> 5;
		return (high * 67108864 + (this.word() >>> 6) + 0.5) * unit53;
	}

	/** One standard normal number. */
	normal(): number {
		for (;;) {
			const first = this.word();
			const x = this.word() * 16777216 + (first >>> 8);
			const layer = first & 255;
			const candidate = x * unit55 * (edge[layer] as number);
			if (Math.abs(candidate) < (edge[layer + 1] as number)) return candidate;
			const slow = this.outside(layer, candidate);
			if (!Number.isNaN(slow)) return slow;
		}
	}

	/** The rare part of a layer beside the next narrower one; NaN asks for a new draw. */
	private outside(layer: number, candidate: number): number {
		if (layer === 0) {
			for (;;) {
				const x = -ln(this.uniform()) / tailStart;
				const y = -ln(this.uniform());
				if (y + y > x * x) return candidate < 0 ? -tailStart - x : tailStart + x;
			}
		}
		const low = density[layer] as number;
		const high = density[layer + 1] as number;
		const height = low + (high - low) * this.uniform();
		return height < exp((-candidate * candidate) / 2) ? candidate : NaN;
	}

	/** Fills with low + width u, u strictly between 0 and 1. */
	fillUniform(out: Float64Array, n: number, low: number, width: number): void {
		let { a, b, c, d } = this;
		for (let i = 0; i < n; i++) {
			let x = Math.imul(b, 5);
			const high = Math.imul((x << 7) | (x >>> 25), 9) >>> 5;
			let t = b << 9;
			c ^= a;
			d ^= b;
			b ^= c;
			a ^= d;
			c ^= t;
			d = (d << 11) | (d >>> 21);
			x = Math.imul(b, 5);
			const rest = Math.imul((x << 7) | (x >>> 25), 9) >>> 6;
			t = b << 9;
			c ^= a;
			d ^= b;
			b ^= c;
			a ^= d;
			c ^= t;
			d = (d << 11) | (d >>> 21);
			out[i] = low + width * ((high * 67108864 + rest + 0.5) * unit53);
		}
		this.a = a;
		this.b = b;
		this.c = c;
		this.d = d;
	}

	/** Fills with mean + deviation z, z standard normal. */
	fillNormal(out: Float64Array, n: number, mean: number, deviation: number): void {
		let { a, b, c, d } = this;
		for (let i = 0; i < n; i++) {
			let x = Math.imul(b, 5);
			const first = Math.imul((x << 7) | (x >>> 25), 9);
			let t = b << 9;
			c ^= a;
			d ^= b;
			b ^= c;
			a ^= d;
			c ^= t;
			d = (d << 11) | (d >>> 21);
			x = Math.imul(b, 5);
			const second = Math.imul((x << 7) | (x >>> 25), 9);
			t = b << 9;
			c ^= a;
			d ^= b;
			b ^= c;
			a ^= d;
			c ^= t;
			d = (d << 11) | (d >>> 21);
			const layer = first & 255;
			let z = (second * 16777216 + (first >>> 8)) * unit55 * (edge[layer] as number);
			if (!(Math.abs(z) < (edge[layer + 1] as number))) {
				this.a = a;
				this.b = b;
				this.c = c;
				this.d = d;
				z = this.outside(layer, z);
				if (Number.isNaN(z)) z = this.normal();
				({ a, b, c, d } = this);
			}
			out[i] = mean + deviation * z;
		}
		this.a = a;
		this.b = b;
		this.c = c;
		this.d = d;
	}

	/** One gamma number of the given shape and scale 1 (Marsaglia & Tsang 2000, ACM TOMS 26, 363). */
	gamma(shape: number): number {
		if (shape < 1) return this.gamma(shape + 1) * exp(ln(this.uniform()) / shape);
		const d = shape - 1 / 3;
		const c = 1 / Math.sqrt(9 * d);
		for (;;) {
			const z = this.normal();
			const root = 1 + c * z;
			if (root <= 0) continue;
			const v = root * root * root;
			if (ln(this.uniform()) < 0.5 * z * z + d * (1 - v + ln(v))) return d * v;
		}
	}

	/** The natural logarithm of one gamma number of the given shape and scale 1. */
	lnGamma(shape: number): number {
		return shape < 1 ? ln(this.gamma(shape + 1)) + ln(this.uniform()) / shape : ln(this.gamma(shape));
	}
}
