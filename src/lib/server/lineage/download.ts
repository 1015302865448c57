import type { vintageFile } from './vintage-view';

const types = {
	// The file may be UTF-16: no character set is claimed for it.
	csv: 'text/csv',
	xlsx: 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet'
} as const;

/** Characters that RFC 8187 leaves as they are in an extended value. */
const extended = (name: string): string =>
	encodeURIComponent(name).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16).toUpperCase()}`);

/**
 * The exact bytes as a download: never shown by the browser, under a policy of its own; an ASCII name that we made, and
 * the file's own name beside it (RFC 6266), and the digest as RFC 9530
 * writes it.
 */
export const download = (ref: string, file: ReturnType<typeof vintageFile>): Response =>
	new Response(new Uint8Array(file.bytes), {
		headers: {
			'content-type': types[file.media],
			'content-length': String(file.bytes.length),
			'content-disposition': `attachment; filename="${ref.replace('/', '-')}.${file.media}"; filename*=UTF-8''${extended(file.fileName)}`,
			'content-security-policy': "sandbox; default-src 'none'",
			'repr-digest': `sha-256=:${Buffer.from(file.sha256.slice(7), 'hex').toString('base64')}:`
		}
	});
