/** The outcome of a recheck as plain text: a line a brief, what is wrong below it, and a summary. */
import { join } from 'node:path';
import type { LedgerFault } from '../record/ledger-fault.js';
import type { Rechecked, RecheckResult } from './rechecked.js';
import { shortPath } from './short-path.js';

/** `onlyFaults` leaves out all that agrees, and everything where nothing is wrong. */
export function recheckLines(result: RecheckResult, { onlyFaults }: { readonly onlyFaults: boolean }): string[] {
  if (onlyFaults && result.agrees) return [];
  const { briefs, covers, folder } = result;
  const shown = [...briefs, ...covers].filter(({ verdict }) => !onlyFaults || verdict !== 'agrees');
  return [
    ...shown.flatMap((each) => briefLines(each, folder)),
    ...(onlyFaults && result.ledger.faults.length === 0 ? [] : ledgerLines(result)),
    summaryOf(result),
  ];
}

const VERDICTS = { agrees: 'agrees', differs: 'differs', unreadable: "can't be read" } as const;

function briefLines({ path, verdict, notes, faults }: Rechecked, folder: string): string[] {
  return [
    [`${path}: ${VERDICTS[verdict]}`, ...notes].join('; '),
    ...faults.map(({ file, message }) => `  ${shortPath(join(folder, file))} ${message}.`),
  ];
}

/** More faults than this are counted: a spreadsheet that rewrites every date breaks every row. */
const MOST_TOLD = 10;

function ledgerLines({ folder, ledger }: RecheckResult): string[] {
  const { faults, rows } = ledger;
  if (faults.length === 0) return [`ledger.csv: agrees, ${counted(rows, 'row')}`];
  const left = faults.length - MOST_TOLD;
  return [
    'ledger.csv: differs',
    ...faults.slice(0, MOST_TOLD).flatMap((fault) => faultLines(fault, folder)),
    ...(left > 0 ? [`  and ${counted(left, 'fault')} more`] : []),
  ];
}

function faultLines({ kind, line, path, message, row }: LedgerFault, folder: string): string[] {
  const isOfRecord = kind === 'record-without-row' || kind === 'record-changed';
  const file = shortPath(join(folder, isOfRecord ? `${path}.json` : 'ledger.csv'));
  const at = isOfRecord || line === null ? file : `${file}:${line}`;
  return row === null ? [`  ${at} ${message}.`] : [`  ${at} ${message}:`, `    ${row}`];
}

/** "12 briefs: 11 agree, 1 differs. 1 cover: 1 agrees. The ledger agrees." */
function summaryOf({ briefs, covers, ledger }: RecheckResult): string {
  return [
    countedVerdicts(briefs, 'brief'),
    ...(covers.length === 0 ? [] : [countedVerdicts(covers, 'cover')]),
    `The ledger ${ledger.faults.length === 0 ? 'agrees' : 'differs'}.`,
  ].join(' ');
}

function countedVerdicts(all: readonly Rechecked[], what: string): string {
  const count = (verdict: Rechecked['verdict']): number => all.filter((each) => each.verdict === verdict).length;
  const [agree, differ, unread] = [count('agrees'), count('differs'), count('unreadable')];
  const parts = [
    ...(agree === 0 ? [] : [agree === 1 ? '1 agrees' : `${agree} agree`]),
    ...(differ === 0 ? [] : [differ === 1 ? '1 differs' : `${differ} differ`]),
    ...(unread === 0 ? [] : [`${unread} can't be read`]),
  ];
  return `${counted(all.length, what)}${parts.length === 0 ? '' : `: ${parts.join(', ')}`}.`;
}

const counted = (count: number, what: string): string => `${count} ${what}${count === 1 ? '' : 's'}`;
