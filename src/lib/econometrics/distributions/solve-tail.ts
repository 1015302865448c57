/** A tail at e^u: its logarithm and the density of u = log x there (x times the density of x). */
export interface TailAt {
	readonly logTail: number;
	readonly logDensity: number;
}

const STEPS = 200;

/**
 * The x > 0 at which a tail probability has the given logarithm: Newton's method on the log tail against log x,
 * kept inside a bracket by bisection. `direction` is -1 for a tail that falls with x, +1 for one that rises.
 */
export function solveTail(
	logTarget: number,
	direction: 1 | -1,
	start: number,
	tail: (x: number) => TailAt
): number {
	let u = Math.log(start);
	let low = -Infinity;
	let high = Infinity;
	for (let step = 0; step < STEPS; step++) {
		const { logTail, logDensity } = tail(Math.exp(u));
		const miss = (logTail - logTarget) * direction;
		if (miss === 0) break;
		if (miss < 0) low = u;
		else high = u;
		// d log tail / du = density / tail.
		const newton = u - miss / Math.exp(logDensity - logTail);
		const next = newton > low && newton < high ? newton : bisect(low, high, u);
		if (Math.abs(next - u) <= 2e-16 * Math.max(1, Math.abs(u))) {
			u = next;
			break;
		}
		u = next;
	}
	return Math.exp(u);
}

/** The middle of the bracket, or a step of growing size while one side is open. */
function bisect(low: number, high: number, u: number): number {
	if (low === -Infinity) return u - Math.max(1, Math.abs(u));
	if (high === Infinity) return u + Math.max(1, Math.abs(u));
	return (low + high) / 2;
}
