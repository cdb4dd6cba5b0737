import { readFile } from 'node:fs/promises';
import { text } from 'node:stream/consumers';
import { analyseRun } from '@shared/analysis/analyseRun';
import { readRunFile, RunFileError } from '@shared/schemas/runFile';
import { runOnce } from './runOnce';

const USAGE =
  'Name the files with the runs: npm run --silent analyse -- FILE.json [FILE.json …]\n' +
  'A single - reads standard input.';

/** npm run analyse -- FILE…: analyses of the runs in the files as JSON, all of them or none. */
await runOnce(async (files) => {
  if (files.length === 0) return USAGE;
  const analyses: unknown[] = [];
  for (const file of files) {
    const name = file === '-' ? 'standard input' : file;
    try {
      analyses.push(...readRunFile(await contentOf(file)).map(analyseRun));
    } catch (error) {
      if (error instanceof RunFileError)
        return `${name}, line ${error.line}: ${error.field && `${error.field}: `}${error.message}`;
      if (isFileError(error)) return `${name}: cannot be read (${error.code}). Check the name and who may read it.`;
      throw error;
    }
  }
  process.stdout.write(`${JSON.stringify(analyses, null, 1)}\n`);
  return undefined;
});

async function contentOf(file: string): Promise<string> {
  return file === '-' ? text(process.stdin) : readFile(file, 'utf8');
}

function isFileError(error: unknown): error is NodeJS.ErrnoException {
  return error instanceof Error && 'syscall' in error;
}
