/** Settings, read once at start from the environment (see README). */
export interface Config {
	/** Folder of the register: keelbook.db and what belongs to it. */
	readonly data: string;
	/** Exact origin people reach the register at, for example https://keelbook.bank.example. */
	readonly origin: string;
	readonly institution: string;
	/** A demo register offers seats; only on a loopback origin. */
	readonly demo: boolean;
	/** IANA zone in which due dates are calendar dates. */
	readonly zone: string;
	/** PEM file of the log's signing key. */
	readonly logKeyFile: string;
}
