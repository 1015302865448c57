// Starts the built server as scripts/start.js does, with a clock that the parent process moves.
let ahead = 0;
/** @type {any} */ (globalThis)[Symbol.for('keelbook.clock')] = () => new Date(Date.now() + ahead);
process.on('message', (/** @type {{ at: string }} */ { at }) => {
	ahead = Date.parse(at) - Date.now();
	process.send?.({ moved: at });
});
await import('../../scripts/start.js');

export {};
