import { crc32, deflateRawSync } from 'node:zlib';

/** One part of an archive, and every lie that may be told about it. */
export interface RawEntry {
	readonly name: string | Uint8Array;
	readonly data: Uint8Array | string;
	/** Name in the local header, where it differs. */
	readonly localName?: string;
	/** Stored (0) or deflated (8); any other number is written as it stands over stored data. */
	readonly method?: number;
	readonly flags?: number;
	readonly crc?: number;
	/** Sizes as both headers give them. */
	readonly size?: number;
	readonly packedSize?: number;
	/** Size as the local header alone gives it. */
	readonly localSize?: number;
	/** Offset as the directory gives it. */
	readonly offset?: number;
	readonly externalAttributes?: number;
	/** Bytes written after the data. */
	readonly gap?: Uint8Array;
}

export interface RawZip {
	readonly prefix?: Uint8Array;
	readonly suffix?: Uint8Array;
	/** Number of entries as the end record gives it. */
	readonly count?: number;
	readonly comment?: string;
}

const encode = (text: string | Uint8Array): Buffer =>
	typeof text === 'string' ? Buffer.from(text, 'utf8') : Buffer.from(text);

/** Writes an archive byte by byte, as the specification PKWARE APPNOTE 6.3 lays it out, true or not. */
export const rawZip = (entries: readonly RawEntry[], zip: RawZip = {}): Buffer => {
	const parts: Buffer[] = [encode(zip.prefix ?? '')];
	const directory: Buffer[] = [];
	let at = parts[0]!.length;
	for (const entry of entries) {
		const data = encode(entry.data);
		const method = entry.method ?? 8;
		const packed = method === 8 ? deflateRawSync(data) : data;
		const crc = entry.crc ?? crc32(data);
		const size = entry.size ?? data.length;
		const packedSize = entry.packedSize ?? packed.length;
		const local = Buffer.alloc(30);
		const localName = encode(entry.localName ?? entry.name);
		local.writeUInt32LE(0x04034b50, 0);
		local.writeUInt16LE(20, 4);
		local.writeUInt16LE(entry.flags ?? 0, 6);
		local.writeUInt16LE(method, 8);
		local.writeUInt32LE(0x00210000, 10);
		local.writeUInt32LE(crc, 14);
		local.writeUInt32LE(packedSize, 18);
		local.writeUInt32LE(entry.localSize ?? size, 22);
		local.writeUInt16LE(localName.length, 26);
		const name = encode(entry.name);
		const central = Buffer.alloc(46);
		central.writeUInt32LE(0x02014b50, 0);
		central.writeUInt16LE(20, 4);
		central.writeUInt16LE(20, 6);
		central.writeUInt16LE(entry.flags ?? 0, 8);
		central.writeUInt16LE(method, 10);
		central.writeUInt32LE(0x00210000, 12);
		central.writeUInt32LE(crc, 16);
		central.writeUInt32LE(packedSize, 20);
		central.writeUInt32LE(size, 24);
		central.writeUInt16LE(name.length, 28);
		central.writeUInt32LE(entry.externalAttributes ?? 0, 38);
		central.writeUInt32LE(entry.offset ?? at, 42);
		directory.push(central, name);
		const written = [local, localName, packed, encode(entry.gap ?? '')];
		parts.push(...written);
		at += written.reduce((sum, bytes) => sum + bytes.length, 0);
	}
	const size = directory.reduce((sum, bytes) => sum + bytes.length, 0);
	const comment = encode(zip.comment ?? '');
	const end = Buffer.alloc(22);
	end.writeUInt32LE(0x06054b50, 0);
	end.writeUInt16LE(zip.count ?? entries.length, 8);
	end.writeUInt16LE(zip.count ?? entries.length, 10);
	end.writeUInt32LE(size, 12);
	end.writeUInt32LE(at, 16);
	end.writeUInt16LE(comment.length, 20);
	return Buffer.concat([...parts, ...directory, end, comment, encode(zip.suffix ?? '')]);
};
