import {
	startAuthentication,
	startRegistration,
	WebAuthnError,
	type PublicKeyCredentialCreationOptionsJSON,
	type PublicKeyCredentialRequestOptionsJSON
} from '@simplewebauthn/browser';

/** A statement to be signed, as the server prepared it. */
export interface StatementView {
	/** Names the statement when it comes back. */
	readonly challenge: string;
	/** First eight characters of the challenge; they stand in the entry too. */
	readonly code: string;
	/** The statement, one sentence a line. */
	readonly words: readonly string[];
	/** For the browser; absent for a demo seat, whose key the server holds. */
	readonly options?: PublicKeyCredentialRequestOptionsJSON | undefined;
	/** What the form posts besides. */
	readonly fields: readonly { readonly name: string; readonly value: string }[];
}

/** What went wrong in a ceremony, and what to do. */
const wordsOf = (fault: unknown): string => {
	if (fault instanceof WebAuthnError && fault.code === 'ERROR_AUTHENTICATOR_PREVIOUSLY_REGISTERED')
		return 'This device holds a passkey of yours already. Use another device, or sign in with this one.';
	const name = fault instanceof Error ? fault.name : '';
	if (name === 'NotAllowedError')
		return 'Nothing was done: it was cancelled, took too long, or the device did not recognise you.';
	if (name === 'SecurityError')
		return 'Passkeys do not work at this address. Open the register under its own name.';
	return `Nothing was done: ${fault instanceof Error ? fault.message : 'the browser gave no reason'}.`;
};

/** A ceremony's answer as JSON, or words to show. */
export type Ceremony = { readonly response: string } | { readonly wrong: string };

const attempt = async (ceremony: () => Promise<unknown>): Promise<Ceremony> => {
	try {
		return { response: JSON.stringify(await ceremony()) };
	} catch (fault) {
		return { wrong: wordsOf(fault) };
	}
};

/** Asks a passkey to sign: a sign-in, or a statement. */
export const signWithPasskey = (optionsJSON: PublicKeyCredentialRequestOptionsJSON): Promise<Ceremony> =>
	attempt(() => startAuthentication({ optionsJSON }));

/** Makes a new passkey. */
export const makePasskey = (optionsJSON: PublicKeyCredentialCreationOptionsJSON): Promise<Ceremony> =>
	attempt(() => startRegistration({ optionsJSON }));

/** What the server found wrong with what was typed, by JSON pointer. */
export interface TypedIssue {
	readonly pointer: string;
	readonly message: string;
}

/** Asks the server for the options of a ceremony; the answer, or words to show. */
export const askFor = async <Options>(
	path: string,
	body: Readonly<Record<string, string>> = {}
): Promise<
	| { readonly options: Options }
	| { readonly wrong: string; readonly issues?: readonly TypedIssue[] | undefined }
> => {
	try {
		const answer = await fetch(path, {
			method: 'POST',
			headers: { 'content-type': 'application/json', accept: 'application/json' },
			body: JSON.stringify(body)
		});
		const said = (await answer.json()) as Options & {
			readonly message?: string;
			readonly issues?: readonly TypedIssue[];
		};
		if (answer.ok) return { options: said };
		return { wrong: said.message ?? 'The server refused. Open the page again.', issues: said.issues };
	} catch {
		return { wrong: 'The server did not answer. Try again.' };
	}
};
