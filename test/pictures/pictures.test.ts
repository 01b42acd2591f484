/** Every page looks as it was accepted. What is meant to look otherwise is accepted anew: `npm run pictures`. */
import { beforeAll, describe, expect, test } from 'vitest';
import { acceptedNames, expectAccepted, REMEDY } from './accepted.js';
import { drawPages, isDrawnAlike } from './pages.js';
import type { Picture } from './png.js';

describe.skipIf(!isDrawnAlike)('every page looks as accepted', () => {
  const names = acceptedNames();
  let pages: ReadonlyMap<string, Picture>;
  beforeAll(async () => {
    pages = await drawPages();
  });

  test('each has its picture, and there is no other', () => {
    const withoutPicture = [...pages.keys()].filter((name) => !names.includes(name));
    const withoutPage = names.filter((name) => !pages.has(name));
    expect({ withoutPicture, withoutPage }, REMEDY).toEqual({ withoutPicture: [], withoutPage: [] });
  });

  test.each(names)('%s', async (name) => {
    const page = pages.get(name);
    if (page !== undefined) await expectAccepted(name, page);
  });
});
