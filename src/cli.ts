#!/usr/bin/env node
/** The command line: reads arguments, calls one file of commands/, sets the exit status. */
import { constants } from 'node:os';
import { SingleBar } from 'cli-progress';
import { Command, CommanderError } from 'commander';
import { shortPath } from './commands/short-path.js';
import { SOFTWARE } from './commands/software.js';
import { startPlan } from './commands/start.js';
import type { Reporter } from './commands/work.js';

const SOME_FAILED = 1;
const UNUSABLE = 2;

const out = (text: string): boolean => process.stdout.write(`${text}\n`);
const err = (text: string): boolean => process.stderr.write(`${text}\n`);

const collect = (name: string, names: readonly string[]): string[] => [...names, name];

const program = new Command('seasonbrief')
  .description('Forecast briefs in plain language, from a plan and past figures.')
  .version(SOFTWARE.version)
  .exitOverride()
  .showHelpAfterError('(seasonbrief --help shows what there is)');

program
  .command('start')
  .description('put a starter plan and figures to edit into a folder')
  .argument('[folder]', 'where to', '.')
  .addHelpText('after', '\nExample:\n  seasonbrief start my-briefs')
  .action(async (folder: string) => {
    const files = await startPlan(folder);
    for (const file of files) out(shortPath(file));
    err(`Edit them, then: seasonbrief write ${shortPath(files.find((file) => file.endsWith('plan.yaml')) ?? '')}`);
  });

program
  .command('advise')
  .description('say which model suits each series, and why; writes a choice sheet for each')
  .argument('[plan]', 'the plan', 'plan.yaml')
  .option('--out <folder>', "the archive's folder (default: out, beside the plan)")
  .option('--only <name>', 'this series only; may be given several times', collect, [])
  .option('--quiet', 'say nothing unless something is wrong')
  .addHelpText('after', '\nExample:\n  seasonbrief advise plan.yaml --only "Antifouling paint"')
  .action(advise);

program
  .command('write')
  .description('write the briefs, the cover, the records and the ledger')
  .argument('[plan]', 'the plan', 'plan.yaml')
  .option('--out <folder>', "the archive's folder (default: out, beside the plan)")
  .option('--only <name>', 'this series only; may be given several times', collect, [])
  .option('--trial', 'write to out/trial, marked as a trial; nothing is filed')
  .option('--no-pdf', 'HTML and records only')
  .option('--replace', 'replace filed briefs whose inputs have changed; the old files are kept')
  .option('--quiet', 'say nothing unless something is wrong')
  .addHelpText('after', '\nExample:\n  seasonbrief write plan.yaml --only "Antifouling paint" --trial')
  .action(write);

program
  .command('recheck')
  .description('compute filed briefs again and confirm them, their pages and the ledger; changes nothing')
  .argument('[out]', "the archive's folder", 'out')
  .option('--only <name>', 'the briefs of this series only; may be given several times', collect, [])
  .option('--no-pdf', 'leave the PDFs out, which take longest')
  .option('--quiet', 'say nothing unless something is wrong')
  .addHelpText('after', '\nExample:\n  seasonbrief recheck my-briefs/out --no-pdf')
  .action(recheck);

interface AdviseArguments {
  readonly out?: string;
  readonly only: readonly string[];
  readonly quiet?: boolean;
}

async function advise(plan: string, { quiet = false, ...options }: AdviseArguments): Promise<void> {
  const { writeChoiceSheets } = await import('./commands/advise.js');
  const { report, end } = reporter(quiet);
  const { table, advised, failures } = await writeChoiceSheets(plan, { ...options, report }).finally(end);
  if (!quiet && advised.length > 0)
    for (const line of [...table, '', ...advised.map(({ file }) => shortPath(file))]) out(line);
  tellFailures(failures, advised.length);
}

/** The user or the system asked the program to end. */
class Interrupted extends Error {
  override readonly name = 'Interrupted';
  readonly status: number;

  constructor(signal: 'SIGINT' | 'SIGTERM') {
    super(`stopped by ${signal}: nothing was filed, and everything is as it was`);
    // As shells have it: 128 and the signal's number.
    this.status = 128 + constants.signals[signal];
  }
}

/** Is aborted when the user or the system asks the program to end. */
function interruption(): AbortSignal {
  const stop = new AbortController();
  for (const signal of ['SIGINT', 'SIGTERM'] as const) process.once(signal, () => stop.abort(new Interrupted(signal)));
  return stop.signal;
}

interface WriteArguments {
  readonly out?: string;
  readonly only: readonly string[];
  readonly trial?: boolean;
  readonly pdf: boolean;
  readonly replace?: boolean;
  readonly quiet?: boolean;
}

async function write(plan: string, { quiet = false, ...options }: WriteArguments): Promise<void> {
  // Loaded when it is needed: charts and the browser's driver take a second that --help can do without.
  const { writeBriefs } = await import('./commands/write.js');
  const { report, end } = reporter(quiet);
  const result = await writeBriefs(plan, { ...options, report, signal: interruption() }).finally(end);
  for (const name of result.unchanged) if (!quiet) err(`${name}: filed already and unchanged; left as it is`);
  if (!quiet && result.files.length > 0) {
    err('Open:');
    for (const file of result.files) out(shortPath(file));
  }
  tellFailures(result.failures, result.written.length);
}

interface RecheckArguments {
  readonly only: readonly string[];
  readonly pdf: boolean;
  readonly quiet?: boolean;
}

async function recheck(folder: string, { quiet = false, ...options }: RecheckArguments): Promise<void> {
  const [{ recheckArchive }, { recheckLines }] = await Promise.all([
    import('./commands/recheck.js'),
    import('./commands/recheck-lines.js'),
  ]);
  const { report, end } = reporter(quiet);
  const result = await recheckArchive(folder, { ...options, report, signal: interruption() }).finally(end);
  for (const line of recheckLines(result, { onlyFaults: quiet })) out(line);
  if (!result.agrees) process.exitCode = SOME_FAILED;
}

function tellFailures(failures: readonly { readonly name: string; readonly message: string }[], done: number): void {
  if (failures.length === 0) return;
  err(`${failures.length} of ${failures.length + done} failed:`);
  for (const { name, message } of failures) err(`series "${name}" failed: ${message}`);
  process.exitCode = SOME_FAILED;
}

/** A bar on a terminal, a line a series elsewhere. */
function reporter(quiet: boolean): { report: Reporter; end: () => void } {
  const bar =
    quiet || !process.stderr.isTTY
      ? null
      : new SingleBar({ format: '{bar} {value} of {total}  {what}', stream: process.stderr, clearOnComplete: true });
  let isStarted = false;
  const progress = (done: number, of: number, what: string): void => {
    if (quiet) return;
    if (bar === null) {
      if (what !== '') err(`${done + 1} of ${of}  ${what}`);
    } else if (isStarted) bar.update(done, { what });
    else {
      bar.start(of, done, { what });
      isStarted = true;
    }
  };
  const message = (text: string): void => {
    if (!quiet) err(text);
  };
  return { report: { message, progress }, end: () => bar?.stop() };
}

try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError) process.exitCode = error.exitCode === 0 ? 0 : UNUSABLE;
  else {
    err(error instanceof Error ? error.message : String(error));
    process.exitCode = error instanceof Interrupted ? error.status : UNUSABLE;
  }
}
