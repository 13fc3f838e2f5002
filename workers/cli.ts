import { basename } from 'node:path';
import { helpText } from './cli/help-text.js';
import { oneSentence } from './cli/one-sentence.js';
import { parseArguments, type PlanCommand } from './cli/parse-arguments.js';
import { planModel } from './cli/plan-model.js';
import { showProgress } from './cli/show-progress.js';
import { showTables } from './cli/show-table.js';
import { UsageError } from './cli/usage-error.js';
import { isAbortError } from './runtime/cancellation.js';
import { JobRefusal } from './runtime/job-refusal.js';

const PROOF_FAILED = 1;
const NOTHING_MADE = 2;
/** 128 + SIGINT, as shells have it. */
const INTERRUPTED = 130;

/** Runs the command line: one result on standard output, or one sentence on standard error. */
async function run(words: readonly string[]): Promise<number> {
  const progress = showProgress(process.stderr);
  try {
    const command = parseArguments(words);
    if (command.kind === 'help') {
      process.stdout.write(helpText);
      return 0;
    }
    const report = await planModel(command, {
      throwIfCancelled: () => {},
      progress: progress.report,
    });
    progress.clear();
    process.stdout.write(
      command.json
        ? JSON.stringify(report) + '\n'
        : showTables(basename(command.modelPath), report, command.outFolder),
    );
    const failed = report.proof.filter((row) => !row.passed);
    if (failed.length === 0) return 0;
    process.stderr.write(
      oneSentence(
        `“${basename(command.modelPath)}” was cut, but its proof failed: ${failed[0].check}, ${failed[0].measured}`,
      ) + '\n',
    );
    return PROOF_FAILED;
  } catch (error) {
    progress.clear();
    if (isAbortError(error)) {
      process.stderr.write('Stopped; nothing was kept.\n');
      return INTERRUPTED;
    }
    process.stderr.write(sentenceFor(error, words) + '\n');
    return NOTHING_MADE;
  }
}

/** The person's fault is said as it is; ours is owned up to. Neither shows a stack. */
function sentenceFor(error: unknown, words: readonly string[]): string {
  const message = error instanceof Error ? error.message : String(error);
  if (error instanceof UsageError || error instanceof JobRefusal) return oneSentence(message);
  return oneSentence(`Planning “${modelOf(words)}” failed by a fault of the program: ${message}`);
}

function modelOf(words: readonly string[]): string {
  try {
    return (parseArguments(words) as PlanCommand).modelPath;
  } catch {
    // Arguments that cannot be parsed have been answered before this is reached.
    return 'the model';
  }
}

process.exitCode = await run(process.argv.slice(2));
