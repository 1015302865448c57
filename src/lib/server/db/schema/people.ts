/** Tables of the people and auth rooms. The first five are functions of the log; the rest lies outside it. */
export interface PeopleSchema {
	/** One row a person; ids only. */
	person_state: {
		person: string;
		state: 'invited' | 'enrolled' | 'disabled';
		since: string;
		/** Salted digest of name and staff number; null until enrolled. */
		identity: string | null;
		/** Instant of the last recovery, for the day in which nothing can be signed (S8). */
		recovered_at: string | null;
		entry: number;
	};
	/** Roles, effective-dated: held from `from_at` until `until_at`. */
	role_grant: {
		person: string;
		role: string;
		from_at: string;
		until_at: string | null;
		granted_by: string;
		entry: number;
	};
	/** The first half of an act of two admins; open until `expires_at`, and while no outcome stands. */
	grant_proposal: {
		seq: number;
		act: 'role.grant' | 'person.re-enable' | 'recovery.start';
		person: string;
		role: string | null;
		from_at: string | null;
		by: string;
		/** Digest of the statement the first admin signed. */
		statement: string;
		expires_at: string;
		outcome: 'approved' | 'withdrawn' | null;
		entry: number;
	};
	/** Public keys enrolled; a seat's key is held by the server and exists only in a demo register. */
	credential: {
		id: string;
		person: string;
		kind: 'passkey' | 'seat';
		public_key: string;
		algorithm: number;
		/** WebAuthn user handle the authenticator keeps. */
		handle: string;
		backup_eligible: number;
		aaguid: string;
		transports: string;
		enrolled_at: string;
		revoked_at: string | null;
		/** Set when the counter did not rise: perhaps a copied key. */
		counter_fell_at: string | null;
		entry: number;
	};
	token: {
		id: string;
		person: string;
		scopes: string;
		created_at: string;
		expires_at: string;
		revoked_at: string | null;
		entry: number;
	};

	/** The mutable directory: all that names a person. */
	person: {
		id: string;
		name: string;
		mail: string;
		staff_number: string;
		salt: Buffer;
		/** WebAuthn user handle: 32 random bytes. */
		handle: Buffer;
	};
	person_name: { person: string; name: string; from_at: string; until_at: string | null };
	session: {
		/** SHA-256 of the token, hex. */
		hash: string;
		/** Random id the log may show. */
		label: string;
		person: string;
		means: string;
		/** Limits given at opening, in minutes: idle and in all. */
		idle: number;
		absolute: number;
		created_at: string;
		seen_at: string;
		agent: string;
	};
	challenge: {
		/** SHA-256 of the challenge, hex. */
		hash: string;
		kind: 'enrol' | 'sign-in' | 'step-up';
		/** Session, or the cookie of a visitor not yet signed in, as a hash. */
		holder: string;
		person: string | null;
		/** Canonical statement a step-up signs, and the payload it speaks of. */
		statement: string | null;
		payload: string | null;
		expires_at: string;
	};
	/** Moving part of a credential: what the authenticator counts. */
	credential_use: { id: string; counter: number; used_at: string | null };
	/** Private keys of demo seats, PKCS#8 in base64. */
	seat_key: { person: string; credential: string; key: string };
	password: { person: string; hash: string; set_at: string };
	recovery_code: { person: string; hash: string; salt: Buffer; used_at: string | null };
	enrolment_link: {
		hash: string;
		person: string;
		kind: 'invitation' | 'first' | 'recovery';
		expires_at: string;
		used_at: string | null;
	};
	token_secret: { id: string; hash: string; label: string; used_at: string | null };
}
