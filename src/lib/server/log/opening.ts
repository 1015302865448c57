import { sha256 } from '$lib/chain/digest';
import { verifierOf, type Verifier } from '$lib/chain/verifier-key';
import type { Entry } from '$lib/domain/entry';

/** The name of a log: the host it was opened at and the beginning of the digest of E-0. */
export const originOf = (opening: string): string => {
	const { payload } = JSON.parse(opening) as Entry<'log.opened'>;
	const digest = sha256(Buffer.from(opening)).toString('hex').slice(0, 16);
	return `${new URL(payload.address).host}/keelbook/${digest}`;
};

/** The verifier that the text of E-0 names. @throws Error when it names none that can be used. */
export const verifierOfLog = (opening: string): Verifier => {
	const { payload } = JSON.parse(opening) as Entry<'log.opened'>;
	return verifierOf(originOf(opening), Buffer.from(payload.publicKey, 'base64').subarray(1));
};
