import type { Page } from 'playwright-core';

/** The figures of a check, or of one of its parts, as the report shows them; `·` where there is none. */
export interface ShownFigures {
	readonly statistic: string;
	readonly statisticName: string;
	readonly critical: string;
	readonly p: string;
	readonly n: string;
}
export interface ShownPart extends ShownFigures {
	readonly about: string;
	readonly verdict: string;
	/** Settings and further figures, `lags 2` and so on. */
	readonly further: readonly string[];
}
export interface ShownCheck extends ShownFigures {
	readonly title: string;
	readonly sentence: string;
	readonly verdict: string;
	readonly nullHypothesis: string;
	readonly further: readonly string[];
	readonly parts: readonly ShownPart[];
}
/** A row of a plain table: text of its cells, and of the second line in them, by the words of the column's head. */
export type ShownRow = Readonly<Record<string, string>>;

export interface ShownReport {
	/** By the check's id in the page's anchors: `residual-arch`. */
	readonly checks: Readonly<Record<string, ShownCheck>>;
	/** Rows by the title of their group, then by term. */
	readonly estimates: Readonly<Record<string, Readonly<Record<string, ShownRow>>>>;
	readonly replication: readonly ShownRow[];
	readonly fit: Readonly<Record<string, ShownRow>>;
	/** Coefficients of the two cheaper models, in the order shown. */
	readonly companions: readonly (readonly ShownRow[])[];
	readonly equation: string;
	readonly text: string;
}

/** Reads every figure of a run's report off the page, those in folded evidence too. */
export const readReport = (page: Page): Promise<ShownReport> =>
	page.evaluate(() => {
		const clean = (text: string | null | undefined): string => (text ?? '').replace(/\s+/g, ' ').trim();
		const main = document.querySelector('main')!;
		/** Text of a cell without its second line. */
		const firstLine = (cell: Element | undefined): string => {
			const copy = cell?.cloneNode(true) as Element | undefined;
			copy?.querySelectorAll('.l2, .mean').forEach((line) => line.remove());
			return clean(copy?.textContent);
		};
		const figuresFrom = (cells: readonly Element[]) => ({
			statistic: firstLine(cells[0]),
			statisticName: clean(cells[0]?.querySelector('.l2')?.textContent),
			critical: firstLine(cells[1]),
			p: firstLine(cells[2]),
			n: firstLine(cells[3])
		});
		const parted = (text: string): string[] => text.split(' · ').filter((each) => each !== '');
		const partsOf = (evidence: Element) => {
			const table = evidence.querySelector('table.parts');
			const heads = [...(table?.querySelectorAll('thead th') ?? [])].map(({ textContent }) =>
				clean(textContent)
			);
			return [...(table?.querySelectorAll(':scope > tbody > tr') ?? [])].map((row) => {
				const cells = [...row.children];
				const at = heads.indexOf('statistic');
				return {
					about: clean(cells[0]?.textContent),
					verdict: heads.includes('verdict') ? clean(cells[1]?.textContent) : '',
					...figuresFrom(at < 0 ? [] : cells.slice(at, at + 4)),
					further: parted(clean(cells.at(-1)?.textContent))
				};
			});
		};
		const checks = Object.fromEntries(
			[...main.querySelectorAll('tr.reading')].map((row) => {
				const cells = [...row.children];
				const evidence = row.nextElementSibling!;
				return [
					row.id.replace(/^check-/, ''),
					{
						title: firstLine(cells[0]),
						sentence: clean(cells[0]!.querySelector('.mean')?.textContent),
						verdict: clean(cells[1]?.textContent),
						...figuresFrom(cells.slice(2, 6)),
						nullHypothesis: clean(cells[6]?.textContent),
						further: parted(clean(evidence.querySelector('.lines .quiet')?.textContent)),
						parts: partsOf(evidence)
					}
				];
			})
		);
		const rowsOf = (table: Element | null, within: ParentNode | null = table) => {
			const heads = [...(table?.querySelectorAll('thead th') ?? [])].map(({ textContent }) =>
				clean(textContent)
			);
			return [...(within?.querySelectorAll('tr') ?? [])]
				.filter((row) => !row.closest('thead') && !row.classList.contains('group'))
				.map((row) =>
					Object.fromEntries([...row.children].map((cell, i) => [heads[i] ?? String(i), firstLine(cell)]))
				);
		};
		const table = (id: string) => document.querySelector(`#${id} table`);
		const keyed = (rows: Record<string, string>[], head: string) =>
			Object.fromEntries(rows.map((row) => [row[head], row]));
		const estimates = Object.fromEntries(
			[...(table('estimates')?.querySelectorAll('tbody') ?? [])].map((body) => [
				clean(body.querySelector('tr.group th')?.textContent),
				keyed(rowsOf(table('estimates'), body), 'term')
			])
		);
		return {
			checks,
			estimates,
			replication: rowsOf(table('replication')),
			fit: keyed(rowsOf(table('companions')), 'model'),
			companions: [...document.querySelectorAll('#companions details table')].map((each) => rowsOf(each)),
			equation: document.querySelector('[role=math]')?.getAttribute('aria-label') ?? '',
			text: clean(main.textContent)
		} as ShownReport;
	});
