import { Invalid } from '$lib/domain/faults';
import type { PolicyLine } from '$lib/domain/policy';

type Value = PolicyLine['value'];

/** A value as the page writes it, and as the form takes it back. */
export const valueText = (value: Value): string =>
	Array.isArray(value) ? value.join(', ') : value === true ? 'yes' : value === false ? 'no' : String(value);

/** The same with the typographic minus sign, for reading. */
export const valueWords = (value: Value): string => valueText(value).replace(/(^|, )-/g, '$1\u2212');

const numberOf = (text: string, pointer: string): number => {
	const plain = text.trim().replace('\u2212', '-');
	const value = Number(plain);
	if (plain === '' || !Number.isFinite(value))
		throw new Invalid([{ pointer, message: `${text === '' ? 'Nothing' : text} is not a number.` }]);
	return value;
};

/** Reads a typed value as one of the kind of the released one. */
export const valueFrom = (text: string, like: Value, pointer: string): Value => {
	if (Array.isArray(like)) {
		const items = text.split(',').map((item) => item.trim());
		return typeof like[0] === 'number' ? items.map((item) => numberOf(item, pointer)) : items;
	}
	if (typeof like === 'number') return numberOf(text, pointer);
	return typeof like === 'boolean' ? text.trim() === 'yes' : text.trim();
};
