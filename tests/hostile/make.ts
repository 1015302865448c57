import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { textFiles } from './text-files';
import { workbookFiles } from './workbook-files';

/** Writes every file and, beside it, what must become of it: `npx tsx tests/hostile/make.ts`. */
for (const { name, bytes, expected } of [...textFiles, ...workbookFiles]) {
	const path = fileURLToPath(new URL(`./files/${name}`, import.meta.url));
	writeFileSync(path, bytes);
	writeFileSync(`${path}.json`, `${JSON.stringify(expected, null, '\t')}\n`);
}
