/** The faults of one file as they are found: the first are kept with their messages, the rest only counted. */
import { type Fault, InputError, type Place } from './input-error.js';

export interface FaultList {
  /** The message is made only where it will be shown. */
  readonly add: (place: Place, message: () => string) => void;
  /** Throws an InputError with what was found so far. */
  readonly throwIfAny: () => void;
}

/** Faults shown in one go; a file of another kind would have one a row. */
const MOST_FAULTS = 20;

export function faultList(): FaultList {
  const kept: Fault[] = [];
  let more = 0;
  return {
    add: (place, message) => {
      if (kept.length < MOST_FAULTS) kept.push({ ...place, message: message() });
      else more++;
    },
    throwIfAny: () => {
      if (kept.length === 0) return;
      const rest: Fault = {
        file: kept[0].file,
        line: null,
        column: null,
        message: `… and ${more} more like these`,
      };
      throw new InputError(more > 0 ? [...kept, rest] : kept);
    },
  };
}
