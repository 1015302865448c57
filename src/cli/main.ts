/** The verbs of the command line; each lies in a file of its own and gives the exit code. */
const verbs: Readonly<Record<string, () => Promise<{ default: (args: string[]) => Promise<number> }>>> = {
	run: () => import('./run'),
	verify: () => import('./verify'),
	replay: () => import('./replay')
};

const usage = `Usage: npm run keelbook -- <verb> …
  run --spec <specification.json> --data <data.csv> [--policy <policy.yaml>] [--tier <1, 2 or 3>] [--seed <n>] [--out <result.json>]
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
