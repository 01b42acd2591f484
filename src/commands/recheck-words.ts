/** What a recheck says of files and numbers, to whoever looks after the archive. */
import type { Comparison, Difference } from '../record/compare.js';
import type { Place } from '../record/filed.js';

/** So many differences are told one by one. */
const MOST_TOLD = 3;

export function differencesTold({ differences }: Comparison): string {
  const told = differences.slice(0, MOST_TOLD).map(differenceTold).join('; ');
  const more = differences.length - MOST_TOLD;
  const largest = Math.max(...differences.map(({ relative }) => relative ?? 0));
  return [
    `computed again it comes out otherwise: ${told}`,
    more > 0 ? `; ${more} more differ` : '',
    more > 0 && largest > 0 ? `, numbers by up to ${percent(largest)}` : '',
  ].join('');
}

const differenceTold = ({ path, filed, recomputed, relative }: Difference): string =>
  `${path} is ${valueTold(filed)}, computed again ${valueTold(recomputed)}${relative === null ? '' : ` (${percent(relative)} apart)`}`;

const percent = (share: number): string => `${Number((share * 100).toPrecision(2))}%`;

const LONGEST = 60;

function valueTold(value: unknown): string {
  if (value === undefined) return 'not there';
  const text = JSON.stringify(value);
  return text.length > LONGEST ? `${text.slice(0, LONGEST)}…` : text;
}

export const apartTold = (apart: number, tolerance: number): string =>
  `its numbers differ by at most ${Number(apart.toPrecision(2))} of their size, within ${tolerance}, as on another machine`;

export const otherPage = (version: string, here: string) => (line: number) =>
  `is not the page that its record gives: it differs from line ${line} on${version === here ? '' : `; version ${version} drew it, perhaps otherwise than this one, ${here}`}`;

export const otherPdf = 'is not what its page gives when it is printed again';

export const otherTable = (line: number): string => `is not what its record gives: it differs from line ${line} on`;

export const FROM_A_COPY = 'Put it back from a copy';

/** What to do about a file that is wrong, and about one that is not there. */
export interface Remedies {
  readonly wrong: string;
  readonly missing: string;
}

const copied: Remedies = { wrong: FROM_A_COPY, missing: FROM_A_COPY };

/** A write makes again what a brief lacks; nothing makes again what was replaced. */
export const briefRemedies = ({ replaced }: Place): Remedies =>
  replaced === null
    ? {
        wrong: `${FROM_A_COPY}, or remove it and run write with the same plan, which makes it again`,
        missing: `${FROM_A_COPY}, or run write with the same plan, which makes it again`,
      }
    : copied;

/** A write makes all of a cover again where its page is not there. */
export function coverRemedies({ replaced, names }: Place): Remedies {
  if (replaced !== null) return copied;
  const first = names.has('cover.html') ? 'remove cover.html and ' : '';
  const remedy = `${FROM_A_COPY}, or ${first}run write with the same plan, which makes the cover again`;
  return { wrong: remedy, missing: remedy };
}
