/** What only plan and figures together can show to be wrong with the plan. */
import { type Every, isPeriod, periodIndex, periodText, seasonOf } from '../calendar/calendar.js';
import type { SeriesFigures } from '../figures/figures.js';
import { type Fault, shown } from '../figures/input-error.js';
import type { Judgement, Plan, PlannedEvent, PlannedSeries } from '../plan/plan.js';
import { type Form, parseForm } from '../sarima/form.js';
import { NO_PRIORS, penaltyOf, statedPriors } from '../sarima/priors.js';
import { eventRegressor } from './events.js';

/** Every such fault of one series. */
export function planFaults(plan: Plan, series: PlannedSeries, figures: SeriesFigures): Fault[] {
  const say = (place: Omit<Fault, 'message'>, message: string): Fault => ({
    file: place.file,
    line: place.line,
    column: place.column,
    message: `series ${shown(series.name)}: ${message}`,
  });
  const events = series.events.flatMap((event) => {
    const message = eventFault(event, figures);
    return message === null ? [] : [say(event.at, message)];
  });
  const rest = [
    aheadFault(plan, figures),
    modelFault(series, figures.every),
    priorsFault(series),
    ...series.soldOut.map((period) => soldOutFault(period, figures)),
    ...(series.budget?.perUnit.map(({ from }) => amountFault(from, figures)) ?? []),
    purchaseFault(plan, series),
  ];
  const judgement = series.judgement.flatMap((entry) => {
    const message = judgementFault(entry, plan, figures);
    return message === null ? [] : [say(entry.at, message)];
  });
  return [...events, ...judgement, ...rest.flatMap((message) => (message === null ? [] : [say(series.at, message)]))];
}

function eventFault(event: PlannedEvent, { every, start, values }: SeriesFigures): string | null {
  const named = [event.from, event.to].find((period) => period !== null && !isPeriod(period, every));
  const what = `event ${shown(event.what)}`;
  if (named !== undefined) return `${what}: ${shown(named ?? '')} is not a period of figures that come every ${every}`;
  const column = eventRegressor(event, every, start, values.length);
  const last = periodText(periodIndex(start, every) + values.length - 1, every);
  if (!column.includes(1)) {
    const remedy = event.from > last ? 'say what is still to come as a judgement' : 'leave it out';
    return `${what} lies outside the figures, which run from ${start} to ${last}; ${remedy}`;
  }
  if (!column.includes(0)) {
    return `${what} covers every figure from ${start} to ${last}, so there is nothing to tell its effect from; leave it out`;
  }
  if (!column.some((one, t) => one === 1 && values[t] !== null)) {
    return `${what} has no figure in its periods, so its effect can't be measured; leave it out, the missing figures stay missing`;
  }
  return null;
}

function judgementFault(
  { what, from, to }: Judgement,
  { ahead }: Plan,
  { every, start, values }: SeriesFigures,
): string | null {
  const named = [from, to].find((period) => period !== null && !isPeriod(period, every));
  const which = `judgement ${shown(what)}`;
  if (named !== undefined) return `${which}: ${shown(named ?? '')} is not a period of figures that come every ${every}`;
  const first = periodIndex(start, every) + values.length;
  const inside = (period: string) => periodIndex(period, every) >= first && periodIndex(period, every) < first + ahead;
  if (inside(from) && (to === null || inside(to))) return null;
  const [next, last] = [first, first + ahead - 1].map((index) => periodText(index, every));
  return `${which} lies outside the outlook, which runs from ${next} to ${last}; change its periods, or name what has happened as an event`;
}

function amountFault(from: string | null, { every }: SeriesFigures): string | null {
  if (from === null || isPeriod(from, every)) return null;
  return `budget: ${shown(from)} is not a period of figures that come every ${every}`;
}

/** Where the plan leaves `ahead` to be found, its own rules can't see how far an order may reach. */
function purchaseFault({ ahead }: Plan, { purchase }: PlannedSeries): string | null {
  if (purchase === null || purchase.arrives + purchase.covers <= ahead) return null;
  return `purchase covers ${purchase.covers} periods from an arrival ${purchase.arrives} ahead, and the plan looks ${ahead} periods ahead; look further ahead or cover fewer`;
}

function aheadFault({ ahead }: Plan, { every }: SeriesFigures): string | null {
  const most = 3 * seasonOf(every);
  return ahead <= most
    ? null
    : `ahead ${ahead} looks further than three years, which are ${most} periods of figures that come every ${every}`;
}

function modelFault({ model }: PlannedSeries, every: Every): string | null {
  if (model === 'advise') return null;
  return seasonFault(parseForm(model), model, every);
}

/** A model's season must be the figures' own: another one is a slip, such as a monthly model on quarters. */
export function seasonFault({ m }: Form, model: string, every: Every): string | null {
  const season = seasonOf(every);
  const isLongYear = every === 'week' && m === 53;
  if (m === 1 || m === season || isLongYear) return null;
  const form = season === 1 ? 'leave the second bracket out' : `write ${season} after the second bracket`;
  return `model ${shown(model)} has a season of ${m} periods, but figures that come every ${every} have ${season} a year; ${form}`;
}

function priorsFault({ model, priors, constant }: PlannedSeries): string | null {
  if (priors === null) return null;
  if (model === 'advise')
    return 'priors belong to a model of your own; write it in place of advise, or leave priors out';
  const form = parseForm(model);
  try {
    penaltyOf(form, statedPriors(form, NO_PRIORS, priors), constant ?? false, 1);
    return null;
  } catch (error) {
    return error instanceof Error ? error.message : String(error);
  }
}

function soldOutFault(period: string, { every, start, values }: SeriesFigures): string | null {
  if (!isPeriod(period, every)) return `sold-out ${shown(period)} is not a period of figures that come every ${every}`;
  const t = periodIndex(period, every) - periodIndex(start, every);
  const last = periodText(periodIndex(start, every) + values.length - 1, every);
  if (t < 0 || t >= values.length)
    return `sold-out ${period} lies outside the figures, which run from ${start} to ${last}; leave it out`;
  return values[t] === null
    ? `sold-out ${period} has no figure, so there is no least demand to go by; put in what was sold, or leave it out`
    : null;
}
