/** What could make a brief wrong: the model's own caveats, and those that the evidence about it adds. */
import type { BriefRecord } from './record.js';

type Caveat = BriefRecord['facts']['caveats'][number];

/** Worst first; the order in which a reader should hear of them. */
const ORDER: readonly Caveat['id'][] = [
  'unsettled-fit',
  'short-history',
  'short-order',
  'judgement',
  'ranges-narrow',
  'changed-lately',
  'odd-period',
  'wide-range',
  'leftover-pattern',
  'sold-out',
  'event-set-aside',
  'lasting-event',
  'missing-figures',
  'near-limit',
  'axis-below-zero',
  'ranges-untested',
];

/** So many forecasts must have been scored before ranges that held too few are told of, and so large a share. */
const ENOUGH_SCORED = 12;
const TOO_FEW_INSIDE = 0.65;

/** An order that runs short this often is warned of, whoever chose it. */
const RISKY = 0.3;

/** The caveats that a series has earned, worst first. */
export function caveatsWith(
  known: readonly Caveat[],
  assumptions: BriefRecord['assumptions'],
  trackRecord: BriefRecord['trackRecord'],
  { judgement, purchase }: Pick<BriefRecord, 'judgement' | 'purchase'>,
): Caveat[] {
  const none = { count: null, share: null, what: null, from: null, to: null };
  const fails = (id: string) => assumptions.find((assumption) => assumption.id === id && assumption.status === 'fails');
  const odd = fails('odd-quarters')?.periods.reduce((most, each) =>
    Math.abs(each.forecastChange) > Math.abs(most.forecastChange) ? each : most,
  );
  const isNarrow = trackRecord !== null && trackRecord.count >= ENOUGH_SCORED && trackRecord.inside80 < TOO_FEW_INSIDE;
  const order = purchase?.decided ?? purchase?.best;
  const added: Caveat[] = [
    ...(order !== undefined && order.chanceShort >= RISKY ? [{ ...none, id: 'short-order' as const }] : []),
    ...(judgement?.entries ?? []).slice(0, 1).map(({ what }) => ({ ...none, id: 'judgement' as const, what })),
    ...(isNarrow
      ? [{ ...none, id: 'ranges-narrow' as const, count: trackRecord.count, share: trackRecord.inside80 }]
      : []),
    ...(fails('stable-over-time') ? [{ ...none, id: 'changed-lately' as const }] : []),
    ...(odd ? [{ ...none, id: 'odd-period' as const, from: odd.period }] : []),
    ...(fails('leftover-pattern') ? [{ ...none, id: 'leftover-pattern' as const }] : []),
  ];
  return [...known.filter(({ id }) => id !== 'ranges-untested' || trackRecord === null), ...added].sort(
    (a, b) => ORDER.indexOf(a.id) - ORDER.indexOf(b.id),
  );
}
