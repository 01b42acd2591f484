/**
 * `seasonbrief advise`: which model for each series, and why.
 *
 *   plan, figures -> checks -> advice -> choice sheets, and a table of what was advised
 */
import { dirname, join, resolve } from 'node:path';
import { renderChoice } from '../page/choice.js';
import { type ChoiceLine, choiceHeads, choiceLine } from '../page/choice-line.js';
import { writeChoiceSheet } from '../record/archive.js';
import { ArchiveError } from '../record/archive-error.js';
import { assembleChoice } from '../record/assemble-choice.js';
import type { SheetModel } from '../record/choice.js';
import { planTheme } from './plan-theme.js';
import { readPlanned } from './read-planned.js';
import { type Reporter, SILENT } from './work.js';

export interface ChoiceOptions {
  /** The archive's folder; `out` beside the plan unless given. */
  readonly out?: string;
  /** Names of the series to advise on; all unless given. */
  readonly only?: readonly string[];
  readonly report?: Reporter;
}

export interface ChoiceResult {
  readonly advised: readonly Advised[];
  readonly failures: readonly { readonly name: string; readonly message: string }[];
  /** What was advised as a table of plain text, a line a series below the line of heads. */
  readonly table: readonly string[];
}

export interface Advised {
  readonly name: string;
  readonly model: SheetModel;
  /** Of the advice over the last origins, Σ|error|/Σ|actual|, and of last year's figure; null with too few figures. */
  readonly miss: number | null;
  readonly lastYearMiss: number | null;
  /** Absolute path of the choice sheet. */
  readonly file: string;
}

/**
 * Writes the choice sheets anew. Throws an InputError or ArchiveError where plan, figures or folder can't be used; a
 * series that no model can be advised for does not stop the others.
 */
export async function writeChoiceSheets(planPath: string, options: ChoiceOptions = {}): Promise<ChoiceResult> {
  const report = options.report ?? SILENT;
  const { plan, wanted, figures } = await readPlanned(planPath, options.only ?? []);
  const theme = await planTheme(plan);
  const folder = resolve(options.out ?? join(dirname(plan.path), 'out'));
  const advised: Advised[] = [];
  const lines: ChoiceLine[] = [choiceHeads(theme)];
  const failures: { name: string; message: string }[] = [];
  for (const [i, series] of wanted.entries()) {
    report.progress(i, wanted.length, series.name);
    const found = figures.get(series.slug);
    if (found === undefined) continue;
    try {
      const sheet = assembleChoice(plan, series, found, theme.sha256);
      const file = await writeChoiceSheet(folder, series.slug, await renderChoice(sheet, theme));
      const { recommended, trackRecord } = sheet;
      advised.push({
        name: series.name,
        model: recommended,
        miss: trackRecord?.miss ?? null,
        lastYearMiss: trackRecord?.lastYearMiss ?? null,
        file,
      });
      lines.push(choiceLine(sheet, theme));
    } catch (error) {
      if (error instanceof ArchiveError) throw error;
      failures.push({ name: series.name, message: error instanceof Error ? error.message : String(error) });
    }
  }
  report.progress(wanted.length, wanted.length, '');
  return { advised, failures, table: advised.length === 0 ? [] : aligned(lines) };
}

/** In columns as wide as their widest cell, two spaces between them. */
function aligned(lines: readonly ChoiceLine[]): string[] {
  const rows = lines.map(({ name, model, why, missed }) => [name, model, why, missed]);
  const widths = rows[0].map((_, column) => Math.max(...rows.map((row) => [...row[column]].length)));
  return rows.map((row) =>
    row
      .map((cell, column) => cell + ' '.repeat(widths[column] - [...cell].length))
      .join('  ')
      .trimEnd(),
  );
}
