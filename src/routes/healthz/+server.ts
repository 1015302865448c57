/** Answers while the event loop does; no detail. */
export const GET = (): Response => new Response('ok\n', { headers: { 'content-type': 'text/plain' } });
