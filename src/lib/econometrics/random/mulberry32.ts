/**
 * The one generator of chance: mulberry32 (T. Ettinger, public domain). The state is advanced before it is mixed, so
 * that draw k depends only on seed + k * 0x6D2B79F5. Its period is 2^32; seed and number of draws belong in a result.
 */

/** A stream of uniform numbers in [0, 1). */
export type Uniform = () => number;

const INCREMENT = 0x6d2b79f5;

/** The stream of a seed (taken modulo 2^32), after `skip` draws. */
export function mulberry32(seed: number, skip = 0): Uniform {
	let state = (seed + Math.imul(skip, INCREMENT)) >>> 0;
	return () => {
		state = (state + INCREMENT) >>> 0;
		let t = Math.imul(state ^ (state >>> 15), state | 1);
		t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
		return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
	};
}

/** An index 0 .. m-1. */
export const drawIndex = (uniform: Uniform, m: number): number => Math.floor(m * uniform());

/** -1 or +1, as in the wild bootstrap. */
export const drawSign = (uniform: Uniform): -1 | 1 => (uniform() < 0.5 ? -1 : 1);

/** A standard normal number from two uniforms (Box & Muller 1958, Ann. Math. Stat. 29, 610-611), cosine branch. */
export function drawNormal(uniform: Uniform): number {
	const radius = Math.sqrt(-2 * Math.log(uniform() || 1 / 4294967296));
	return radius * Math.cos(2 * Math.PI * uniform());
}
