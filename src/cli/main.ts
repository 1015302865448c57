/** The verbs of the command line; each lies in a file of its own and gives the exit code. */
const verbs: Readonly<Record<string, () => Promise<{ default: (args: string[]) => Promise<number> }>>> = {
	verify: () => import('./verify'),
	replay: () => import('./replay')
};

const usage = `Usage: npm run keelbook -- <verb> …
  verify <data folder> [--key <verifier key>] [--json]
  replay <data folder>
`;

const [verb = '', ...args] = process.argv.slice(2);
if (Object.hasOwn(verbs, verb)) {
	process.exitCode = await (await verbs[verb]!()).default(args);
} else {
	process.stderr.write(usage);
	process.exitCode = 64;
}

export {};
