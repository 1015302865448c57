/** Tables of the lineage room. */
export interface LineageSchema {
	/** One row a dataset: figures of one kind, stored again at each vintage. */
	dataset: { ref: string; model: string; name: string; vintages: number; entry: number };
	/** Models that may use a dataset: the one it was opened for and those it was attached to. */
	dataset_model: { dataset: string; model: string; entry: number };
	vintage: {
		/** `D-0051/2`. */
		ref: string;
		dataset: string;
		n: number;
		/** The model it was stored for. */
		model: string;
		sha256: string;
		size: number;
		media: 'csv' | 'xlsx';
		file_name: string;
		vintage_date: string;
		frequency: 'annual' | 'quarterly' | 'monthly';
		period_from: string;
		period_to: string;
		observations: number;
		/** Digest of the canonical table read from the file. */
		table_sha256: string;
		/** JSON: what the uploader chose where the file could be read in two ways. */
		choices: string;
		/** JSON: how the file was read, and what is odd in it. */
		notes: string;
		at: string;
		by: string;
		entry: number;
	};
	vintage_column: {
		vintage: string;
		position: number;
		name: string;
		role: 'observed' | 'scenario' | 'left-out';
		series: string | null;
		unit: string | null;
		source: string | null;
		code: string | null;
		vintage_date: string | null;
		seasonal: 'none' | 'adjusted' | 'unadjusted' | 'unknown' | null;
		notes: string | null;
		entry: number;
	};
	/** The dictionary that models share: one row a series of a provider, as the latest vintage describes it. */
	series: {
		id: string;
		source: string;
		code: string;
		label: string;
		unit: string;
		seasonal: 'none' | 'adjusted' | 'unadjusted' | 'unknown';
		first_vintage: string;
		last_vintage: string;
		entry: number;
	};
	/** Outside the log: files that wait for their preview to be confirmed. */
	upload: {
		id: string;
		person: string;
		model: string;
		sha256: string;
		size: number;
		bytes: Buffer;
		file_name: string;
		at: string;
		expires_at: string;
	};
}
