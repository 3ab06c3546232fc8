/** Something the user can mend. Its message is shown as it is, without a stack. */
export class Problem extends Error {}

/** Runs a command's main function; a Problem ends it with its message and status 1. */
export async function runCommand(name, main) {
  try {
    process.exitCode = (await main()) ?? process.exitCode ?? 0;
  } catch (error) {
    if (!(error instanceof Problem)) throw error;
    console.error(`${name}: ${error.message}`);
    process.exitCode = 1;
  }
}
