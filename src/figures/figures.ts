/**
 * The file of past figures: from bytes to one gapless row of periods for each series.
 *
 *   bytes -> text -> table -> body and footer -> period and figure of every wanted cell -> SeriesFigures
 *
 * Comma-separated values as people keep them: the encoding, the sign between cells, the way periods and numbers are
 * written are settled from the whole file. What can be read in two ways is refused with both; nothing is guessed from
 * one cell.
 */
import { bytesOf } from './bytes.js';
import { faultList } from './fault-list.js';
import { numbersOf } from './numbers.js';
import { observationsOf } from './observations.js';
import { periodsOf } from './periods.js';
import type { FiguresRequest, SeriesFigures } from './request.js';
import { seriesOf } from './series.js';
import { tableOf } from './table.js';
import { bodyOf } from './table-body.js';
import { textOf } from './text.js';
import { refuseUnnamed } from './unnamed.js';

export type { FiguresRequest, Finding, FooterRow, SeriesFigures } from './request.js';

/** Figures by slug. Throws an InputError with every fault found (the first twenty). */
export async function readFigures(request: FiguresRequest): Promise<ReadonlyMap<string, SeriesFigures>> {
  const faults = faultList();
  const text = textOf(await bytesOf(request), request.fileTyped);
  const table = tableOf(text, request);
  const { rows, footer } = bodyOf(table, request);
  refuseUnnamed(table, rows, request, faults);
  const periods = periodsOf(table, rows, request, faults);
  const observations = observationsOf(table, rows, periods, request, faults);
  const numberOf = numbersOf(observations, request, faults);
  faults.throwIfAny();
  const figures = seriesOf(observations, numberOf, periods.every, footer, request, faults);
  faults.throwIfAny();
  return figures;
}
