import type { Note } from '$lib/domain/lineage';
import { reject } from './rejected';
import { checkMarkup, scanXml } from './xml';

export type Parts = ReadonlyMap<string, Uint8Array>;

export interface SheetPart {
	readonly name: string;
	readonly part: string;
	readonly state: 'visible' | 'hidden' | 'very hidden';
}

export interface WorkbookStructure {
	readonly sheets: readonly SheetPart[];
	readonly dates1904: boolean;
	readonly sharedStrings: { readonly part: string; readonly count: number } | undefined;
	readonly styles: string | undefined;
	readonly notes: readonly Note[];
}

interface Relation {
	readonly id: string;
	readonly type: string;
	readonly target: string;
}

export const workbookPart = 'xl/workbook.xml';
export const workbookRelations = 'xl/_rels/workbook.xml.rels';
export const rootRelations = '_rels/.rels';
export const contentTypes = '[Content_Types].xml';

const mostSheets = 64;
const mostSharedStrings = 2_000_000;

const spreadsheet = [
	'http://schemas.openxmlformats.org/spreadsheetml/2006/main',
	'http://purl.oclc.org/ooxml/spreadsheetml/main'
];

const partOf = (parts: Parts, name: string): Uint8Array =>
	parts.get(name) ?? reject('corrupt', [`${name} is missing`]);

/** Kind of a relationship: the last step of its type, the same in both editions of the standard. */
const kindOf = (type: string): string => type.slice(type.lastIndexOf('/') + 1);

/** A target inside the package as a part name; undefined for what lies outside. */
const resolve = (base: string, target: string): string => {
	const steps = target.startsWith('/') ? [] : base.split('/').filter(Boolean);
	for (const step of target.split('/')) {
		if (step === '..') steps.pop();
		else if (step !== '.' && step !== '') steps.push(step);
	}
	return steps.join('/');
};

const relations = (parts: Parts, name: string, base: string): Relation[] => {
	const found: Relation[] = [];
	scanXml(name, partOf(parts, name), {
		open: (element, attributes) => {
			if (element !== 'Relationship' || attributes.TargetMode === 'External') return;
			const { Id: id, Type: type, Target: target } = attributes;
			if (!id || !type || target === undefined) return reject('corrupt', [name]);
			found.push({ id, type, target: resolve(base, target) });
		}
	});
	return found;
};

/** Code, controls and embedded objects are refused; links and queries are left alone and named. */
const carried = (parts: Parts): Note[] => {
	const names = [...parts.keys()].map((name) => name.toLowerCase());
	const any = (test: RegExp): boolean => names.some((name) => test.test(name));
	const types = Buffer.from(partOf(parts, contentTypes)).toString('latin1').toLowerCase();
	if (any(/vbaproject|\/activex\/|\/embeddings\/|xl\/macrosheets\//) || types.includes('macroenabled'))
		reject('macros', []);
	const note = (message: string): Note => ({ code: 'not-followed', message });
	return [
		...(any(/^xl\/externallinks\//)
			? [note('Links to other workbooks were not followed; stored values were read.')]
			: []),
		...(any(/^xl\/(?:connections\.xml|querytables\/)|^custom(?:xml|data)\//)
			? [note('Queries and connections were not followed; stored values were read.')]
			: [])
	];
};

const sheetState = (state: string | undefined): SheetPart['state'] =>
	state === 'hidden' ? 'hidden' : state === 'veryHidden' ? 'very hidden' : 'visible';

const sharedStringCount = (parts: Parts, part: string): number => {
	let count = 0;
	scanXml(part, partOf(parts, part), {
		open: (name) => {
			if (name === 'si' && ++count > mostSharedStrings) reject('too-many-cells', [mostSharedStrings]);
		}
	});
	return count;
};

interface Declared {
	readonly sheets: { readonly name: string; readonly id: string; readonly state: SheetPart['state'] }[];
	dates1904: boolean;
}

const declared = (parts: Parts): Declared => {
	const found: Declared = { sheets: [], dates1904: false };
	let root = true;
	scanXml(workbookPart, partOf(parts, workbookPart), {
		open: (element, attributes) => {
			if (root && !Object.values(attributes).some((value) => spreadsheet.includes(value)))
				reject('xml', [workbookPart]);
			root = false;
			if (element === 'workbookPr') found.dates1904 = /^(?:1|true)$/.test(attributes.date1904 ?? '');
			if (element !== 'sheet') return;
			const id = Object.entries(attributes).find(([key]) => key.endsWith(':id'))?.[1];
			if (!attributes.name || !id) return reject('corrupt', [workbookPart]);
			found.sheets.push({ name: attributes.name, id, state: sheetState(attributes.state) });
		}
	});
	if (found.sheets.length > mostSheets) reject('too-many-sheets', [mostSheets]);
	return found;
};

/** Every markup part is free of document types, also those that are never read. */
const checkAllMarkup = (parts: Parts): void => {
	for (const [name, bytes] of parts) if (/\.(?:xml|rels|vml)$/i.test(name)) checkMarkup(name, bytes);
};

/**
 * What a workbook says it holds, read strictly and without following anything outside of it.
 * @throws Rejected `macros`, `xml-dtd`, `xml`, `corrupt` or `too-many-sheets`.
 */
export const readStructure = (parts: Parts): WorkbookStructure => {
	const notes = carried(parts);
	checkAllMarkup(parts);
	scanXml(contentTypes, partOf(parts, contentTypes), {});
	const root = relations(parts, rootRelations, '');
	const office = root.filter(({ type }) => kindOf(type) === 'officeDocument');
	if (office.length !== 1 || office[0]!.target !== workbookPart) reject('corrupt', [rootRelations]);
	const links = relations(parts, workbookRelations, 'xl');
	const target = (kind: string): string | undefined =>
		links.find(({ type }) => kindOf(type) === kind)?.target;
	const { sheets: named, dates1904 } = declared(parts);
	const sheets = named.flatMap(({ name, id, state }): SheetPart[] => {
		const link = links.find((relation) => relation.id === id);
		if (!link) return reject('corrupt', [`sheet ${name}`]);
		if (kindOf(link.type) !== 'worksheet') return [];
		partOf(parts, link.target);
		return [{ name, part: link.target, state }];
	});
	if (sheets.length === 0) reject('corrupt', ['no sheet']);
	const shared = target('sharedStrings');
	const styles = target('styles');
	if (styles !== undefined) scanXml(styles, partOf(parts, styles), {});
	return {
		sheets,
		dates1904,
		sharedStrings:
			shared === undefined ? undefined : { part: shared, count: sharedStringCount(parts, shared) },
		styles,
		notes
	};
};
