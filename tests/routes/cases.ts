import type { PersonId } from '$lib/domain/actor';
import type { Populated, Subject } from '../support/populated';
import type { Body, Row } from './row';
import type { Asked } from './ask';

/** One address of a row. */
export interface Case {
	readonly reference: 'own' | 'other' | 'absent' | 'absent part' | 'malformed';
	readonly asked: Asked;
}

const nowhere: Subject = {
	model: 'M-999',
	submitted: 1,
	draft: 1,
	withdrawn: 1,
	dataset: 'D-9999',
	run: 'R-9999',
	seq: 999_999_999,
	upload: `u_${'a'.repeat(26)}`,
	sha256: `sha256:${'0'.repeat(64)}`
};
const unknownPerson: PersonId = `p_${'b'.repeat(26)}`;

type Params = Readonly<Record<string, string>>;

/** Values that no matcher takes. */
const malformed: Params = {
	model: 'M-1',
	dataset: 'D-12x',
	run: 'R-7',
	seq: '01',
	person: 'p_nobody',
	n: '0'
};

const segment = /\[(\w+)=\w+\]/g;

const paramsOf = (row: Row, subject: Subject, person: PersonId): Params => ({
	model: subject.model,
	dataset: subject.dataset,
	run: subject.run,
	seq: String(subject.seq),
	person,
	n: String(row.n ? row.n(subject) : 1)
});

const addressOf = (row: Row, params: Params): string => {
	const path = row.route.replaceAll(/\/\(\w+\)/g, '').replaceAll(segment, (_, name: string) => params[name]!);
	return path === '' ? '/' : path;
};

const encoded = (body: Body): Pick<Asked, 'body' | 'headers'> => {
	if ('json' in body)
		return { body: JSON.stringify(body.json), headers: { 'content-type': 'application/json' } };
	if ('text' in body) return { body: body.text, headers: { 'content-type': 'text/csv' } };
	if ('form' in body) {
		const sent = new URLSearchParams();
		for (const [name, value] of Object.entries(body.form))
			for (const one of [value].flat()) sent.append(name, one);
		return { body: sent.toString(), headers: { 'content-type': 'application/x-www-form-urlencoded' } };
	}
	const { name, text } = body.file;
	const part = `content-disposition: form-data; name="file"; filename="${name}"\r\ncontent-type: text/csv`;
	return {
		body: `--limit\r\n${part}\r\n\r\n${text}\r\n--limit--\r\n`,
		headers: { 'content-type': 'multipart/form-data; boundary=limit' }
	};
};

const askedOf = (row: Row, bank: Populated, subject: Subject, params: Params): Asked => {
	const [method, action = ''] = row.method.split(' ') as ['GET' | 'POST', string?];
	const search = row.search?.(subject) ?? '';
	const path = addressOf(row, params) + action + (action ? search.replace(/^\?/, '&') : search);
	if (method === 'GET') return { path };
	// A form is sent even when it is empty; a program sends nothing then.
	const page = !row.route.startsWith('/api/');
	return { method, path, ...(row.send || page ? encoded(row.send?.(subject, bank) ?? { form: {} }) : {}) };
};

const params = (route: string): readonly string[] => [...route.matchAll(segment)].map(([, name]) => name!);

/** The addresses of a row: with references in its path or search, of each kind; else the one. */
export const casesOf = (row: Row, bank: Populated): readonly Case[] => {
	const { own, other, people } = bank;
	const names = params(row.route);
	const person = people.stranger;
	const at = (subject: Subject, change: Params = {}): Asked =>
		askedOf(row, bank, subject, { ...paramsOf(row, subject, person), ...change });
	const cases: Case[] = [{ reference: 'own', asked: at(own) }];
	if (row.about === 'model') {
		cases.push({ reference: 'other', asked: at(other) });
		cases.push({ reference: 'absent', asked: at(nowhere) });
		if (names.includes('n')) cases.push({ reference: 'absent part', asked: at(own, { n: '999' }) });
	}
	if (row.about === 'person') cases.push({ reference: 'absent', asked: at(own, { person: unknownPerson }) });
	for (const name of names)
		cases.push({ reference: 'malformed', asked: at(own, { [name]: malformed[name]! }) });
	return cases;
};
