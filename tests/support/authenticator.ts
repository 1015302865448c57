import { createHash, generateKeyPairSync, randomBytes, sign, type KeyObject } from 'node:crypto';

/** What the page asks for, as the server's options say it. */
export interface Asked {
	readonly challenge: string;
	readonly origin: string;
}

/** What a test bends: everything is as it should be unless it says otherwise. */
export interface Bent {
	readonly type?: string;
	readonly origin?: string;
	readonly challenge?: string;
	/** Members added to the client data. */
	readonly more?: Readonly<Record<string, unknown>>;
	/** The text of the client data, after it was made. */
	readonly clientData?: (text: string) => string | Buffer;
	readonly rpId?: string;
	readonly flags?: number;
	readonly counter?: number;
	readonly trailing?: Buffer;
	readonly userHandle?: string | undefined;
	readonly id?: string;
	readonly rawId?: string;
	readonly key?: Buffer;
	readonly attestedId?: Buffer;
	readonly signature?: (good: Buffer) => Buffer;
}

export const flags = { up: 1, uv: 4, be: 8, bs: 16, at: 64, ed: 128 } as const;

const sha256 = (bytes: Buffer | string): Buffer => createHash('sha256').update(bytes).digest();

/** CBOR of RFC 8949, as far as an attestation object and a COSE_Key need it. */
const head = (major: number, length: number): Buffer => {
	if (length < 24) return Buffer.of((major << 5) | length);
	if (length < 256) return Buffer.of((major << 5) | 24, length);
	return Buffer.of((major << 5) | 25, length >> 8, length & 255);
};
const int = (n: number): Buffer => (n >= 0 ? head(0, n) : head(1, -1 - n));
const bytes = (b: Buffer): Buffer => Buffer.concat([head(2, b.length), b]);
const text = (t: string): Buffer => Buffer.concat([head(3, Buffer.byteLength(t)), Buffer.from(t)]);
export const cborMap = (pairs: readonly (readonly [number, number | Buffer])[]): Buffer =>
	Buffer.concat([
		head(5, pairs.length),
		...pairs.flatMap(([label, value]) => [int(label), typeof value === 'number' ? int(value) : bytes(value)])
	]);

export type Kind = 'ES256' | 'EdDSA' | 'RS256';

interface Keys {
	readonly privateKey: KeyObject;
	readonly cose: Buffer;
}

const from = (part: string | undefined): Buffer => Buffer.from(part ?? '', 'base64url');

const makeKeys = (kind: Kind): Keys => {
	if (kind === 'EdDSA') {
		const { privateKey, publicKey } = generateKeyPairSync('ed25519');
		const { x } = publicKey.export({ format: 'jwk' });
		return {
			privateKey,
			cose: cborMap([
				[1, 1],
				[3, -8],
				[-1, 6],
				[-2, from(x)]
			])
		};
	}
	if (kind === 'RS256') {
		const { privateKey, publicKey } = generateKeyPairSync('rsa', { modulusLength: 2048 });
		const { n, e } = publicKey.export({ format: 'jwk' });
		return {
			privateKey,
			cose: cborMap([
				[1, 3],
				[3, -257],
				[-1, from(n)],
				[-2, from(e)]
			])
		};
	}
	const { privateKey, publicKey } = generateKeyPairSync('ec', { namedCurve: 'P-256' });
	const { x, y } = publicKey.export({ format: 'jwk' });
	return {
		privateKey,
		cose: cborMap([
			[1, 2],
			[3, -7],
			[-1, 1],
			[-2, from(x)],
			[-3, from(y)]
		])
	};
};

/** A software authenticator with one resident credential: does what a good one does, and whatever a test bends. */
export class Authenticator {
	readonly id = randomBytes(16);
	readonly keys: Keys;
	counter = 0;
	userHandle = '';
	constructor(
		readonly rpId: string,
		readonly kind: Kind = 'ES256',
		/** Flags of the credential itself: eligible for backup, backed up. */
		readonly backup = 0
	) {
		this.keys = makeKeys(kind);
	}

	#clientData(type: string, asked: Asked, bent: Bent): Buffer {
		const said = JSON.stringify({
			type: bent.type ?? type,
			challenge: bent.challenge ?? asked.challenge,
			origin: bent.origin ?? asked.origin,
			crossOrigin: false,
			...bent.more
		});
		return Buffer.from(bent.clientData ? bent.clientData(said) : said);
	}

	#authenticatorData(bent: Bent, extra: number, attested: Buffer): Buffer {
		const counter = Buffer.alloc(4);
		counter.writeUInt32BE(bent.counter ?? this.counter);
		const flag = bent.flags ?? flags.up | flags.uv | this.backup;
		return Buffer.concat([
			sha256(bent.rpId ?? this.rpId),
			Buffer.of(flag | extra),
			counter,
			attested,
			bent.trailing ?? Buffer.alloc(0)
		]);
	}

	/** Answers `navigator.credentials.create`. */
	create(asked: Asked & { readonly userHandle: string }, bent: Bent = {}): string {
		this.userHandle = asked.userHandle;
		const id = bent.attestedId ?? this.id;
		const length = Buffer.of(id.length >> 8, id.length & 255);
		const attested = Buffer.concat([Buffer.alloc(16), length, id, bent.key ?? this.keys.cose]);
		const authData = this.#authenticatorData(bent, flags.at, attested);
		const object = Buffer.concat([
			head(5, 3),
			text('fmt'),
			text('none'),
			text('attStmt'),
			head(5, 0),
			text('authData'),
			bytes(authData)
		]);
		const shown = bent.id ?? this.id.toString('base64url');
		return JSON.stringify({
			id: shown,
			rawId: bent.rawId ?? shown,
			type: 'public-key',
			clientExtensionResults: {},
			response: {
				clientDataJSON: this.#clientData('webauthn.create', asked, bent).toString('base64url'),
				attestationObject: object.toString('base64url'),
				transports: ['internal']
			}
		});
	}

	/** Answers `navigator.credentials.get`. */
	get(asked: Asked, bent: Bent = {}): string {
		const clientData = this.#clientData('webauthn.get', asked, bent);
		const authenticatorData = this.#authenticatorData(bent, 0, Buffer.alloc(0));
		const signed = Buffer.concat([authenticatorData, sha256(clientData)]);
		const good = sign(this.kind === 'EdDSA' ? null : 'sha256', signed, this.keys.privateKey);
		const shown = bent.id ?? this.id.toString('base64url');
		const handle = 'userHandle' in bent ? bent.userHandle : this.userHandle;
		return JSON.stringify({
			id: shown,
			rawId: bent.rawId ?? shown,
			type: 'public-key',
			clientExtensionResults: {},
			response: {
				clientDataJSON: clientData.toString('base64url'),
				authenticatorData: authenticatorData.toString('base64url'),
				signature: (bent.signature ? bent.signature(good) : good).toString('base64url'),
				...(handle === undefined ? {} : { userHandle: handle })
			}
		});
	}
}
