/** The room's face: periods, reporting years, and what a locale calls them. */
export { dateText, dayNumber, dayOf, isDate } from './dates.js';
export { type Every, everies, seasonOf } from './every.js';
export { dateName, type NameStyle, periodName, positionName, spanName } from './names.js';
export {
  calendarYearOf,
  examplePeriod,
  isPeriod,
  kindsOf,
  periodHolding,
  periodIndex,
  periodText,
  position,
  spanOf,
  yearOf,
} from './period.js';
