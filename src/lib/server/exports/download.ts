/** Bytes offered as a file: never shown by the browser as a page. */
export const download = (name: string, type: string, bytes: string | Uint8Array): Response =>
	new Response(typeof bytes === 'string' ? bytes : new Uint8Array(bytes), {
		headers: {
			'content-type': type,
			'content-disposition': `attachment; filename="${name}"`,
			'x-content-type-options': 'nosniff',
			'cache-control': 'private, no-store'
		}
	});
