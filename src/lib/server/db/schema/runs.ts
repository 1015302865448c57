/** Tables of the runs room. */
export interface RunsSchema {
	run: {
		ref: string;
		model: string;
		version: string;
		vintage: string;
		file_sha256: string;
		table_sha256: string;
		policy_digest: string;
		tier: number;
		/** JSON: overridden policy lines, each with its reason. */
		settings: string;
		seed: number;
		purpose: 'planned' | 'validation' | 'exploratory';
		engine: string;
		/** Digest of the canonical request and of the blob that holds it. */
		request_digest: string;
		requested_by: string;
		requested_at: string;
		state: 'requested' | 'finished' | 'failed' | 'cancelled';
		ended_at: string | null;
		result_blob: string | null;
		result_digest: string | null;
		holds: number | null;
		query: number | null;
		fails: number | null;
		not_assessable: number | null;
		/** JSON: the verdict of each group of checks. */
		groups: string | null;
		/** JSON: the few numbers lists show. */
		headline: string | null;
		failure: string | null;
		entry: number;
	};
	/** Outside the log: runs that wait or are being computed. */
	run_queue: { run: string; enqueued_at: string; attempts: number };
}
