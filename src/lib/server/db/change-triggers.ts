/** A column as `table_info` gives it. */
export interface Column {
	readonly name: string;
	readonly pk: number;
}

/** The trigger that keeps what a change of a row was; on an update only the columns that differ. */
export const recorder = (
	table: string,
	verb: 'insert' | 'update' | 'delete',
	columns: readonly Column[]
): [string, string] => {
	const shown = columns.filter(({ name }) => name !== 'entry').map(({ name }) => name);
	const key = columns.filter(({ pk }) => pk > 0).sort((a, b) => a.pk - b.pk);
	const side = verb === 'delete' ? 'old' : 'new';
	const row = key.map(({ name }) => `${side}."${name}"`).join(` || ' ' || `);
	const whole = `json_object(${shown.map((name) => `'${name}', ${side}."${name}"`).join(', ')})`;
	const differing = (of: 'old' | 'new'): string =>
		`(select json_group_object(name, value) from (${shown
			.map(
				(name) =>
					`select '${name}' as name, ${of}."${name}" as value where old."${name}" is not new."${name}"`
			)
			.join(' union all ')}))`;
	const [before, after] = {
		insert: ['null', whole],
		update: [differing('old'), differing('new')],
		delete: [whole, 'null']
	}[verb];
	const entry = '(select seq from current_entry)';
	return [
		`${table}_kept_${verb}`,
		`CREATE TRIGGER ${table}_kept_${verb} after ${verb} on ${table} begin` +
			` insert into entry_change (entry, n, tbl, row, before, after) select ${entry},` +
			` (select coalesce(max(n) + 1, 1) from entry_change where entry = ${entry}),` +
			` '${table}', ${row}, ${before}, ${after}; end`
	];
};
