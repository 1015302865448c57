import { reject } from './rejected';

export type Attributes = Readonly<Record<string, string>>;

/** Names come without their namespace prefix; attributes keep theirs. */
export interface XmlEvents {
	open?(name: string, attributes: Attributes): void;
	text?(text: string): void;
	close?(name: string): void;
}

const xmlLimits = { depth: 64, attributes: 256, textCharacters: 1024 * 1024 } as const;

const entities: Readonly<Record<string, string>> = { amp: '&', lt: '<', gt: '>', quot: '"', apos: "'" };

const local = (name: string): string => name.slice(name.indexOf(':') + 1);

// eslint-disable-next-line no-control-regex -- characters that XML 1.0 forbids
const forbidden = /[\u0000-\u0008\u000b\u000c\u000e-\u001f\ufffe\uffff]/;
const nameForm = /^[\p{L}_:][\p{L}\p{N}_:.\u00b7-]*$/u;

const decode = (part: string, bytes: Uint8Array): string => {
	const wide =
		bytes[0] === 0xff && bytes[1] === 0xfe
			? 'utf-16le'
			: bytes[0] === 0xfe && bytes[1] === 0xff
				? 'utf-16be'
				: '';
	let text: string;
	try {
		text = new TextDecoder(wide || 'utf-8', { fatal: true }).decode(bytes);
	} catch {
		return reject('xml', [part]);
	}
	const declared = /^<\?xml[^>]*?\sencoding\s*=\s*["']([^"']*)["']/.exec(text)?.[1]?.toLowerCase();
	const known = wide ? ['utf-16', wide] : ['utf-8', 'us-ascii', 'ascii'];
	if (declared !== undefined && !known.includes(declared)) reject('xml', [part]);
	return text;
};

/** Refuses document types, entity declarations, inclusions and processing instructions wherever they stand. */
const refuseDtd = (text: string): void => {
	if (/<!(?:doctype|entity)/i.test(text) || text.includes('http://www.w3.org/2001/XInclude'))
		reject('xml-dtd', []);
	const instruction = text.indexOf('<?', text.startsWith('<?xml') ? 5 : 0);
	if (instruction !== -1) reject('xml-dtd', []);
};

/** Only the decoding and the refusal of document types, for parts that are carried but not read. */
export const checkMarkup = (part: string, bytes: Uint8Array): void => refuseDtd(decode(part, bytes));

class Scanner {
	private at = 0;
	private readonly stack: string[] = [];
	private roots = 0;

	constructor(
		private readonly part: string,
		private readonly source: string,
		private readonly events: XmlEvents
	) {}

	run(): void {
		if (this.source.startsWith('<?xml')) this.at = this.until('?>', 5);
		while (this.at < this.source.length) {
			const open = this.source.indexOf('<', this.at);
			this.characters(open === -1 ? this.source.length : open);
			if (open === -1) break;
			this.markup();
		}
		if (this.stack.length > 0 || this.roots !== 1) this.fail();
	}

	private fail(): never {
		return reject('xml', [this.part]);
	}

	/** Place behind the next `mark`. */
	private until(mark: string, from: number): number {
		const found = this.source.indexOf(mark, from);
		return found === -1 ? this.fail() : found + mark.length;
	}

	private characters(end: number): void {
		if (end === this.at) return;
		if (end - this.at > xmlLimits.textCharacters) this.fail();
		const text = this.unescape(this.source.slice(this.at, end));
		if (this.stack.length === 0) {
			if (text.trim() !== '') this.fail();
		} else this.events.text?.(text);
		this.at = end;
	}

	private unescape(text: string): string {
		if (!text.includes('&')) return text;
		return text.replace(/&([^;&]{0,12};?)/g, (_, body: string) => {
			if (!body.endsWith(';')) return this.fail();
			const name = body.slice(0, -1);
			const code = /^#(?:x([\da-fA-F]{1,6})|(\d{1,7}))$/.exec(name);
			if (!code) return entities[name] ?? this.fail();
			const point = code[1] === undefined ? Number(code[2]) : parseInt(code[1], 16);
			if (point > 0x10ffff || (point >= 0xd800 && point <= 0xdfff)) return this.fail();
			const character = String.fromCodePoint(point);
			return forbidden.test(character) ? this.fail() : character;
		});
	}

	private markup(): void {
		const { source, at } = this;
		if (source.startsWith('<!--', at)) this.at = this.until('-->', at + 4);
		else if (source.startsWith('<![CDATA[', at)) this.cdata();
		else if (source[at + 1] === '/') this.closing();
		else if (source[at + 1] === '!' || source[at + 1] === '?') this.fail();
		else this.opening();
	}

	private cdata(): void {
		const end = this.until(']]>', this.at + 9);
		if (this.stack.length === 0 || end - this.at > xmlLimits.textCharacters) this.fail();
		this.events.text?.(this.source.slice(this.at + 9, end - 3));
		this.at = end;
	}

	private closing(): void {
		const end = this.until('>', this.at);
		const name = this.source.slice(this.at + 2, end - 1).trimEnd();
		if (this.stack.pop() !== name) this.fail();
		this.events.close?.(local(name));
		this.at = end;
	}

	/** Where the tag that starts at `at` ends; quotes may hold `>`. */
	private tagEnd(): number {
		const { source } = this;
		let quote = 0;
		for (let i = this.at + 1; i < source.length; i++) {
			const code = source.charCodeAt(i);
			if (quote !== 0) {
				if (code === quote) quote = 0;
			} else if (code === 34 || code === 39) quote = code;
			else if (code === 62) return i;
			else if (code === 60) this.fail();
		}
		return this.fail();
	}

	private opening(): void {
		const end = this.tagEnd();
		const empty = this.source[end - 1] === '/';
		const body = this.source.slice(this.at + 1, empty ? end - 1 : end);
		const space = body.search(/[\s]/);
		const name = space === -1 ? body : body.slice(0, space);
		if (!nameForm.test(name)) this.fail();
		if (this.stack.length === 0 && ++this.roots > 1) this.fail();
		const attributes = space === -1 ? none : this.attributes(body, space);
		this.events.open?.(local(name), attributes);
		if (empty) this.events.close?.(local(name));
		else if (this.stack.push(name) > xmlLimits.depth) this.fail();
		this.at = end + 1;
	}

	private attributes(body: string, from: number): Attributes {
		const found: Record<string, string> = Object.create(null) as Record<string, string>;
		const form = /\s+(?:([^\s=<>"']+)\s*=\s*(?:"([^"<]*)"|'([^'<]*)'))?/y;
		form.lastIndex = from;
		let count = 0;
		while (form.lastIndex < body.length) {
			const parts = form.exec(body);
			if (!parts) return this.fail();
			const name = parts[1];
			if (name === undefined) continue;
			if (name in found || ++count > xmlLimits.attributes) this.fail();
			found[name] = this.unescape(parts[2] ?? parts[3] ?? '');
		}
		return found;
	}
}

const none: Attributes = Object.freeze(Object.create(null) as Record<string, string>);

/**
 * Reads well-formed XML strictly, without document types, entities of its own, or anything fetched: UTF-8 or UTF-16 by
 * byte order mark, depth up to 64, up to 256 attributes an element.
 * @throws Rejected `xml` or `xml-dtd`, naming the part.
 */
export const scanXml = (part: string, bytes: Uint8Array, events: XmlEvents): void => {
	const text = decode(part, bytes);
	refuseDtd(text);
	if (forbidden.test(text)) reject('xml', [part]);
	new Scanner(part, text, events).run();
};

/** The part as UTF-8, for a reader that knows no other encoding. */
export const asUtf8 = (part: string, bytes: Uint8Array): Uint8Array =>
	new TextEncoder().encode(
		decode(part, bytes).replace(/^<\?xml[^>]*\?>/, '<?xml version="1.0" encoding="UTF-8"?>')
	);
