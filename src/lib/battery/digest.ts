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

/** A copy without some of its members. */
const without = (value: object, names: readonly string[]): Record<string, unknown> =>
	Object.fromEntries(Object.entries(value).filter(([name]) => !names.includes(name)));

/** Sentences, sources and the coordinates of plots are rendered from the rest or stand in the program. */
const evidenceOf = (check: Check): unknown => ({
	...without(check, ['detail', 'plot', 'source']),
	...(check.parts && { parts: check.parts.map((part) => without(part, ['detail'])) })
});

/** A refusal counts by its reason. */
const reasonOnly = <T extends { readonly refused?: { readonly reason: string } }>(value: T): unknown => ({
	...without(value, ['refused']),
	...(value.refused && { refused: value.refused.reason })
});

/**
 * SHA-256 of the numbers, verdicts, parameters and reasons of a result and of its request, canonical, at ten significant
 * digits. The specification counts by its digest in the request. The purpose does not count: a validator who repeats
 * the owner's run must be able to read that the results are equal.
 */
export const resultDigest = (result: Omit<RunResult, 'digest'>): string =>
	valueDigest(
		rounded(
			reasonOnly({
				...(without(result, ['specification']) as { refused?: { reason: string } }),
				request: without(result.request, ['digest', 'purpose']),
				companions: result.companions.map(reasonOnly),
				checks: result.checks.map(evidenceOf)
			})
		)
	);
