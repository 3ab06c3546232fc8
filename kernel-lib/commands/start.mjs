import { existsSync, mkdirSync } from 'node:fs';
import { createRequire } from 'node:module';
import { basename, dirname } from 'node:path';
import { help, readArguments } from './arguments.mjs';
import { CellFailure, executeNotebook } from './execute.mjs';
import { runLab } from './lab.mjs';
import { linkLibrary } from './link-library.mjs';
import { catalogueFile, stemOf, writeNewNotebook } from './new-notebook.mjs';
import { resultLine } from './notebook-outputs.mjs';
import { notebookFor, openRoles } from './notebook-template.mjs';
import { inRoot } from './paths.mjs';
import { Problem, runCommand } from './problem.mjs';
import { createProgress } from './progress.mjs';
import { checkMachine, setUp } from './set-up.mjs';

const flagship = inRoot('notebooks', '01-from-field-to-age.ipynb');
const results = inRoot('notebooks', 'results');

const library = () => createRequire(import.meta.url)(inRoot('kernel-lib', 'dist', 'index.js'));

/** Reads the user's catalogue and writes the notebook for it. */
async function prepareOwn(catalogue, progress) {
  progress.line(`Reading ${catalogue} ...`);
  let field;
  try {
    field = await library().readCatalogue(catalogue);
  } catch (error) {
    throw new Problem(error.message);
  }
  const { roles, warnings } = field;
  const content = notebookFor({
    title: stemOf(catalogue),
    source: basename(catalogue),
    roles,
    columns: field.columns.map((column) => column.name),
    warnings,
  });
  for (const line of linkLibrary(dirname(catalogue))) progress.line(line);
  const { notebook, report } = writeNewNotebook(catalogue, content);
  const known = Object.keys(roles).length;
  progress.line(`Wrote ${notebook} (${known} of ${field.columns.length} columns recognised)`);
  return { notebook, executed: notebook, report, open: openRoles(roles).map(([role]) => role) };
}

function prepareFlagship() {
  if (!existsSync(flagship)) throw new Problem(`${flagship} is missing; get it back with: git checkout notebooks`);
  mkdirSync(results, { recursive: true });
  const name = basename(flagship, '.ipynb');
  return {
    notebook: flagship,
    executed: inRoot('notebooks', 'results', `${name}.ipynb`),
    report: inRoot('notebooks', 'results', `${name}.html`),
    open: [],
  };
}

/** Runs the notebook and makes its report; prints the result line. */
async function runAndReport({ notebook, executed, report }, progress) {
  const run = await executeNotebook(notebook, executed, { progress });
  progress.line(`Ran ${basename(notebook)} in ${run.elapsed}; with its results: ${executed}`);
  try {
    await library().exportReport({ notebook: executed, output: report });
  } catch (error) {
    throw new Problem(error.message);
  }
  progress.line(resultLine(run.notebook) ?? 'The notebook printed no line that begins with "Result: ".');
  progress.line(`Report: ${report}`);
}

/** Whether a cell stopped because a column is still to be chosen, and for no other reason. */
const awaitsChoice = (failure, { open }) => open.length > 0 && failure.reason.includes('marked CHOOSE');

function tellChoice(failure, { open }) {
  console.log(`Your choice is needed: no column was recognised for ${open.join(', ')}.`);
  console.log(`Fill in the lines marked CHOOSE in ${failure.output}, then run its cells.`);
}

function tellFailure(failure) {
  console.error(`npm start: cell ${failure.number} (${failure.heading}) failed.`);
  console.error(failure.reason.replace(/^/gm, '  '));
  console.error(`The notebook as far as it ran: ${failure.output}`);
}

async function main() {
  checkMachine();
  const words = readArguments(process.argv.slice(2));
  if (words.help) {
    console.log(help);
    return 0;
  }
  // npm runs scripts in the project's folder; INIT_CWD is where the user stands.
  const base = process.env.INIT_CWD ?? process.cwd();
  const catalogue = words.catalogue === null ? null : catalogueFile(words.catalogue, base);
  const progress = createProgress();
  await setUp({ progress });
  const job = catalogue === null ? prepareFlagship() : await prepareOwn(catalogue, progress);
  let status = 0;
  try {
    await runAndReport(job, progress);
  } catch (error) {
    if (!(error instanceof CellFailure)) throw error;
    status = 1;
    if (!awaitsChoice(error, job)) {
      tellFailure(error);
      return status;
    }
    // Choices are made in JupyterLab, so it opens for them; any other failure ends here.
    tellChoice(error, job);
  }
  if (!words.lab) return status;
  return (await runLab(job.notebook)) || status;
}

await runCommand('npm start', main);
