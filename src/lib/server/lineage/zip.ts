import { unzipSync } from 'fflate';
import { crc32, inflateRawSync } from 'node:zlib';
import { reject } from './rejected';

/** Bounds of an unpacked workbook, in bytes. */
export const zipLimits = Object.freeze({
	entries: 512,
	entryBytes: 64 * 1024 * 1024,
	totalBytes: 128 * 1024 * 1024,
	ratio: 200,
	/** The ratio counts once an entry unpacks to more than this. */
	ratioFrom: 1024 * 1024
});

interface ZipEntry {
	readonly name: string;
	readonly method: number;
	readonly flags: number;
	readonly crc: number;
	readonly packed: number;
	readonly size: number;
	readonly offset: number;
}

const signatures = {
	local: 0x04034b50,
	central: 0x02014b50,
	end: 0x06054b50,
	descriptor: 0x08074b50
} as const;
const sentinel = 0xffffffff;
const bits = { encrypted: 1, descriptor: 8, patched: 0x20, strong: 0x40, masked: 0x2000 } as const;

const corrupt = (what: string): never => reject('corrupt-zip', [what]);

const mebibytes = (bytes: number): number => bytes / (1024 * 1024);
const tooLarge = (): never => reject('unpacks-too-large', [mebibytes(zipLimits.totalBytes)]);

const safeName = (bytes: Uint8Array): string => {
	let name: string;
	try {
		name = new TextDecoder('utf-8', { fatal: true }).decode(bytes);
	} catch {
		return corrupt('a part name that is not text');
	}
	if (name.length === 0 || name.length > 512) corrupt('a part name of odd length');
	if (/[\p{Cc}\\:]/u.test(name) || name.startsWith('/')) corrupt('a part name that leaves the workbook');
	if (name.split('/').some((part) => part === '..' || part === '.'))
		corrupt('a part name that leaves the workbook');
	return name;
};

const centralEntry = (bytes: Uint8Array, view: DataView, at: number): { entry: ZipEntry; next: number } => {
	if (at + 46 > bytes.length || view.getUint32(at, true) !== signatures.central) corrupt('its directory');
	const flags = view.getUint16(at + 8, true);
	const method = view.getUint16(at + 10, true);
	const nameLength = view.getUint16(at + 28, true);
	const next = at + 46 + nameLength + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
	if (flags & (bits.encrypted | bits.strong | bits.masked)) reject('encrypted', []);
	if (method !== 0 && method !== 8) corrupt(`compression method ${method}`);
	const [packed, size, offset] = [
		view.getUint32(at + 20, true),
		view.getUint32(at + 24, true),
		view.getUint32(at + 42, true)
	];
	if (packed === sentinel || size === sentinel || offset === sentinel) corrupt('64-bit sizes');
	if (view.getUint16(at + 34, true) !== 0) corrupt('several disks');
	// High half of the external attributes: Unix mode; 0xA000 is a symbolic link.
	if ((view.getUint16(at + 40, true) & 0xf000) === 0xa000) corrupt('a symbolic link');
	if (next > bytes.length) corrupt('its directory');
	const name = safeName(bytes.subarray(at + 46, at + 46 + nameLength));
	return { entry: { name, method, flags, crc: view.getUint32(at + 16, true), packed, size, offset }, next };
};

/** Reads the directory: one end record, at the very end, without comment; one disk; directory right before it. */
const directory = (bytes: Uint8Array, view: DataView): ZipEntry[] => {
	const end = bytes.length - 22;
	if (end < 0 || view.getUint32(end, true) !== signatures.end || view.getUint16(end + 20, true) !== 0)
		corrupt('its end record');
	const count = view.getUint16(end + 10, true);
	const size = view.getUint32(end + 12, true);
	const offset = view.getUint32(end + 16, true);
	if (view.getUint32(end + 4, true) !== 0 || view.getUint16(end + 8, true) !== count)
		corrupt('several disks');
	if (count > zipLimits.entries) tooLarge();
	if (offset + size !== end) corrupt('data behind its directory');
	const entries: ZipEntry[] = [];
	let at = offset;
	for (let i = 0; i < count; i++) {
		const { entry, next } = centralEntry(bytes, view, at);
		entries.push(entry);
		at = next;
	}
	if (at !== end) corrupt('its directory');
	return entries;
};

const uniqueNames = (entries: readonly ZipEntry[]): void => {
	const seen = new Set<string>();
	for (const { name } of entries) {
		const folded = name.normalize('NFC').toLowerCase();
		if (seen.has(folded)) corrupt('two parts of one name');
		seen.add(folded);
	}
};

const declaredSizes = (entries: readonly ZipEntry[]): void => {
	let total = 0;
	for (const { packed, size } of entries) {
		total += size;
		const ratio = size / Math.max(1, packed);
		if (size > zipLimits.entryBytes || total > zipLimits.totalBytes) tooLarge();
		if (size > zipLimits.ratioFrom && ratio > zipLimits.ratio) tooLarge();
	}
};

/** Checks the local header against the directory; gives where the data begin and where the entry ends. */
const localHeader = (
	bytes: Uint8Array,
	view: DataView,
	entry: ZipEntry,
	limit: number
): { data: number; end: number } => {
	const at = entry.offset;
	if (at + 30 > limit || view.getUint32(at, true) !== signatures.local) corrupt('a part header');
	const nameLength = view.getUint16(at + 26, true);
	const data = at + 30 + nameLength + view.getUint16(at + 28, true);
	const streamed = (entry.flags & bits.descriptor) !== 0;
	const agrees = (place: number, value: number): boolean =>
		view.getUint32(place, true) === value || (streamed && view.getUint32(place, true) === 0);
	if (data > limit) corrupt('a part header');
	const same =
		view.getUint16(at + 6, true) === entry.flags &&
		view.getUint16(at + 8, true) === entry.method &&
		agrees(at + 14, entry.crc) &&
		agrees(at + 18, entry.packed) &&
		agrees(at + 22, entry.size) &&
		safeName(bytes.subarray(at + 30, at + 30 + nameLength)) === entry.name;
	if (!same) corrupt('a part header that contradicts the directory');
	let end = data + entry.packed;
	if (streamed) {
		if (end + 12 > limit) corrupt('a part that runs over its end');
		if (view.getUint32(end, true) === signatures.descriptor) end += 4;
		const holds = view.getUint32(end, true) === entry.crc && view.getUint32(end + 4, true) === entry.packed;
		if (!holds || view.getUint32(end + 8, true) !== entry.size) corrupt('a part descriptor');
		end += 12;
	}
	if (end > limit) corrupt('a part that runs over its end');
	return { data, end };
};

const unpack = (packed: Uint8Array, entry: ZipEntry): Uint8Array => {
	if (entry.method === 0) {
		if (entry.packed !== entry.size) corrupt('a part of wrong size');
		return packed;
	}
	try {
		// The cap is the declared size, which the limits have already bounded: a lie ends here, not in memory.
		return inflateRawSync(packed, { maxOutputLength: Math.max(1, entry.size) });
	} catch {
		return corrupt('a part that does not unpack to its size');
	}
};

/** A second reader must see the same parts: what two readers see differently is an attack or damage. */
const sameListing = (bytes: Uint8Array, entries: readonly ZipEntry[]): void => {
	const listed: string[] = [];
	try {
		unzipSync(bytes, {
			filter: ({ name, originalSize }) => {
				listed.push(`${originalSize} ${name}`);
				return false;
			}
		});
	} catch {
		corrupt('its directory');
	}
	const own = entries.map(({ name, size }) => `${size} ${name}`);
	if (listed.length !== own.length || listed.some((line, i) => line !== own[i])) corrupt('its directory');
};

/**
 * Unpacks a zip archive that is strictly what its directory says: parts back to back from the first byte to the
 * directory, headers that agree, nothing before, between or behind, names unique and inside, sizes and CRC-32 true.
 * @throws Rejected `corrupt-zip`, `encrypted` or `unpacks-too-large`; sizes are refused before anything is unpacked.
 */
export const unpackZip = (bytes: Uint8Array): ReadonlyMap<string, Uint8Array> => {
	const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	const entries = directory(bytes, view);
	declaredSizes(entries);
	uniqueNames(entries);
	sameListing(bytes, entries);
	const limit = view.getUint32(bytes.length - 22 + 16, true);
	const parts = new Map<string, Uint8Array>();
	let at = 0;
	for (const entry of [...entries].sort((a, b) => a.offset - b.offset)) {
		if (entry.offset !== at) corrupt('bytes that belong to no part');
		const { data, end } = localHeader(bytes, view, entry, limit);
		const content = unpack(bytes.subarray(data, data + entry.packed), entry);
		if (content.length !== entry.size || crc32(content) !== entry.crc)
			corrupt('a part whose check sum is wrong');
		parts.set(entry.name, content);
		at = end;
	}
	if (at !== limit) corrupt('bytes that belong to no part');
	return parts;
};
