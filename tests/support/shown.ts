import { expect } from 'vitest';

/** A figure as a page shows it, in ASCII: thin spaces out, U+2212 as a hyphen, a power of ten as `e`. */
export const plain = (shown: string): string =>
	shown
		.replace(/\s/g, '')
		.replace('\u2212', '-')
		.replace(/×10([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)$/, (_, power: string) => {
			const digits = [...power].map((d) => (d === '⁻' ? '-' : String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(d))));
			return `e${digits.join('')}`;
		});

const unsigned = (zero: string): string => (Number(zero) === 0 ? zero.replace('-', '') : zero);

/** A value rounded to the digits after the point that a shown figure has. */
const roundedLike = (value: number, shown: string): string => {
	const [mantissa = '', power] = shown.split('e');
	const decimals = mantissa.split('.')[1]?.length ?? 0;
	return power === undefined
		? unsigned(value.toFixed(decimals))
		: value.toExponential(decimals).replace('+', '');
};

/** Counts the figures held against a reference, so that a test can say how many there were. */
export class Figures {
	count = 0;

	/** The shown figure is the reference value, rounded as shown. */
	same(shown: string | undefined, reference: unknown, what: string): void {
		expect(typeof reference, `reference of ${what}`).toBe('number');
		const text = plain(shown ?? 'nothing');
		expect(text, `${what}: a figure is shown`).toMatch(/^-?\d+(\.\d+)?(e-?\d+)?$/);
		expect(text, what).toBe(roundedLike(reference as number, text));
		this.count++;
	}

	/** A p-value to three decimals, `< 0.001` below. */
	sameP(shown: string | undefined, reference: unknown, what: string): void {
		expect(typeof reference, `reference of ${what}`).toBe('number');
		const p = reference as number;
		expect(plain(shown ?? 'nothing'), `p of ${what}`).toBe(p < 0.001 ? '<0.001' : p.toFixed(3));
		this.count++;
	}
}
