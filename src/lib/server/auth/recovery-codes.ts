import { randomBytes } from 'node:crypto';
import { base32 } from '$lib/chain/base32';
import type { Actor, PersonId } from '$lib/domain/actor';
import type { Grant, StepUp } from '$lib/domain/entry';
import type { Ctx } from '$lib/server/context';
import type { Tx } from '$lib/server/db/handle';
import type { Schema } from '$lib/server/db/schema';
import { record } from '$lib/server/log/record';
import { unusedCodes, useCode } from './auth.queries';
import { secretHash } from './secret';

const count = 10;

const hashed = (salt: Buffer, code: string): string =>
	secretHash(Buffer.concat([salt, Buffer.from(code, 'utf8')]));

/** Blanks, hyphens and capitals are how people write them down. */
const plain = (typed: string): string => typed.toLowerCase().replace(/[^a-z2-7]/g, '');

/** `abcd-efgh-ijkl-mnop`: 80 bits in fours. */
const inFours = (code: string): string => code.match(/.{4}/g)!.join('-');

/** Ten codes of 80 bits: old ones die, only salted digests are stored, and this is the one time they are seen. */
export const makeCodes = (
	ctx: Ctx,
	tx: Tx,
	actor: Actor,
	grant: Grant,
	person: PersonId,
	stepUp?: StepUp
): readonly string[] => {
	tx.remove('recovery_code', { person });
	const codes = Array.from({ length: count }, () => base32(randomBytes(10)));
	for (const code of codes) {
		const salt = randomBytes(16);
		tx.insert('recovery_code', { person, hash: hashed(salt, code), salt, used_at: null });
	}
	record(ctx, tx, actor, grant, {
		type: 'recovery-codes.made',
		subjects: [person],
		payload: { person, count },
		...(stepUp ? { stepUp } : {})
	});
	return codes.map(inFours);
};

/** The stored digest a typed code answers to, if any. Every unused code is compared, found or not. */
export const codeMatches = (rows: readonly Schema['recovery_code'][], typed: string): string | undefined => {
	const code = plain(typed);
	return rows.map(({ salt, hash }) => (hashed(salt, code) === hash ? hash : undefined)).find(Boolean);
};

/** Takes a code once. @returns how many are left, or undefined when it was taken meanwhile */
export const takeCode = (ctx: Ctx, tx: Tx, person: PersonId, hash: string): number | undefined => {
	if (tx.run(useCode(tx.q, hash, ctx.now().toISOString())) !== 1) return undefined;
	return tx.all(unusedCodes(tx.q, person)).length;
};
