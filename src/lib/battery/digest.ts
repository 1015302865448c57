import { canonical } from '$lib/chain/canonical';
import { digestOf } from '$lib/chain/digest';
import type { RunRequest } from '$lib/domain/run';
import type { Check, RunResult } from '$lib/domain/run-result';

const significant = 10;

/** Numbers at ten significant digits: what two builds of the same program are promised to agree on. */
const rounded = (value: unknown): unknown => {
	if (typeof value === 'number')
		return Number.isInteger(value) ? value : Number(value.toPrecision(significant));
	if (Array.isArray(value)) return value.map(rounded);
	if (value === null || typeof value !== 'object') return value;
	return Object.fromEntries(
		Object.entries(value)
			.filter(([, item]) => item !== undefined)
			.map(([key, item]) => [key, rounded(item)])
	);
};

/** `sha256:<64 hex>` of the canonical JSON of a value. */
export const valueDigest = (value: unknown): string => digestOf(Buffer.from(canonical(value), 'utf8'));

/** Digest of a request: equal requests are the same run, made again. */
export const requestDigest = (request: RunRequest): string => valueDigest(request);

/** Sentences and the coordinates of plots are rendered from the rest. */
const evidenceOf = (check: Check): unknown => {
	const { detail: _detail, plot: _plot, source: _source, ...evidence } = check;
	return {
		...evidence,
		...(check.parts && { parts: check.parts.map(({ detail: _words, ...part }) => part) })
	};
};

/**
 * SHA-256 of the numbers, verdicts, parameters and reasons of a result and of its request, canonical, at ten significant
 * digits.
 */
export const resultDigest = (result: Omit<RunResult, 'digest'>): string => {
	const { checks, specification: _specification, refused, ...rest } = result;
	return valueDigest(
		rounded({
			...rest,
			...(refused && { refused: refused.reason }),
			companions: result.companions.map(({ refused: why, ...companion }) => ({
				...companion,
				...(why && { refused: why.reason })
			})),
			checks: checks.map(evidenceOf)
		})
	);
};
