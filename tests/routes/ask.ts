import { Agent, request, type IncomingHttpHeaders } from 'node:http';

/** A request as it goes over the wire: no header is added but those needed to send it. */
export interface Asked {
	readonly method?: string;
	readonly path: string;
	readonly headers?: Readonly<Record<string, string>>;
	readonly body?: string | Uint8Array;
}

export interface Answer {
	readonly status: number;
	readonly headers: IncomingHttpHeaders;
	readonly text: string;
}

const agent = new Agent({ keepAlive: true, maxSockets: 8 });

/** Sends one request and reads its answer; redirects are answers. */
export const ask = (origin: string, { method = 'GET', path, headers = {}, body }: Asked): Promise<Answer> =>
	new Promise((resolve, reject) => {
		const sent = request(new URL(origin), { agent, method, path, headers }, (response) => {
			const chunks: Buffer[] = [];
			response.on('data', (chunk: Buffer) => chunks.push(chunk));
			response.on('error', reject);
			response.on('end', () =>
				resolve({
					status: response.statusCode ?? 0,
					headers: response.headers,
					text: Buffer.concat(chunks).toString()
				})
			);
		});
		sent.on('error', reject);
		if (body !== undefined) sent.setHeader('content-length', Buffer.byteLength(body));
		sent.end(body);
	});
