// Cruises trees one after the other in one process: loading the program costs far more than a tree of two files.
// Reads [{ dir, rooms }, …] from standard input, answers a list of the names of broken rules for each.
import { readFileSync } from 'node:fs';
import path from 'node:path';
import { cruise } from 'dependency-cruiser';
import extractDepcruiseOptions from 'dependency-cruiser/config-utl/extract-depcruise-options';
import extractTSConfig from 'dependency-cruiser/config-utl/extract-ts-config';

const root = path.resolve(import.meta.dirname, '../../..');
const options = await extractDepcruiseOptions(path.join(root, '.dependency-cruiser.cjs'));
const answers = [];
for (const { dir, rooms } of JSON.parse(readFileSync(0, 'utf8'))) {
  process.chdir(dir);
  const { output } = await cruise(rooms, { ...options, baseDir: dir }, undefined, {
    tsConfig: extractTSConfig(path.join(dir, 'tsconfig.json')),
  });
  answers.push(output.summary.violations.map((violation) => violation.rule.name));
}
process.stdout.write(JSON.stringify(answers));
