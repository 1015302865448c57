import { parseDocument } from 'yaml';

/** What the browser says it did, as far as it is judged (WebAuthn Level 3, section 5.8.1). */
export interface ClientData {
	readonly type: string;
	readonly challenge: string;
	readonly origin: string;
	readonly crossOrigin?: boolean;
	readonly topOrigin?: string;
}

/** Client data that is not what was asked for. */
export class BadClientData extends Error {
	override readonly name = 'BadClientData';
}

// ignoreBOM keeps a byte order mark in the text, where the JSON reader refuses it.
const utf8 = new TextDecoder('utf-8', { fatal: true, ignoreBOM: true });

/** The strict reader: UTF-8, JSON, one object, no key twice. @throws BadClientData */
export const readClientData = (bytes: Uint8Array): ClientData => {
	let value: unknown;
	let text: string;
	try {
		text = utf8.decode(bytes);
		value = JSON.parse(text);
	} catch (cause) {
		throw new BadClientData('the client data is not JSON in UTF-8', { cause });
	}
	// JSON.parse hides a key that stands twice; a YAML reader (JSON is a subset) names it.
	const [twice] = parseDocument(text, { uniqueKeys: true }).errors;
	if (twice) throw new BadClientData('a key of the client data stands twice');
	if (typeof value !== 'object' || value === null || Array.isArray(value))
		throw new BadClientData('the client data is not an object');
	const { type, challenge, origin, crossOrigin, topOrigin } = value as Record<string, unknown>;
	if (typeof type !== 'string' || typeof challenge !== 'string' || typeof origin !== 'string')
		throw new BadClientData('the client data lacks type, challenge or origin');
	if (crossOrigin !== undefined && typeof crossOrigin !== 'boolean')
		throw new BadClientData('crossOrigin is no boolean');
	return {
		type,
		challenge,
		origin,
		...(crossOrigin === undefined ? {} : { crossOrigin }),
		...top(topOrigin)
	};
};

const top = (topOrigin: unknown): { topOrigin?: string } => {
	if (topOrigin === undefined) return {};
	if (typeof topOrigin !== 'string') throw new BadClientData('topOrigin is no text');
	return { topOrigin };
};
