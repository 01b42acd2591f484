import { describe, expect, test } from 'vitest';
import { checkModel } from '../../src/commands/check-model.js';
import { InputError } from '../../src/figures/input-error.js';
import { parsePlan } from '../../src/plan/plan.js';

const HEAD = `heading: Stores
prepared-for: Saltmarsh Boatyard
issued: 2026-10-05
figures:
  file: figures.csv
  period: quarter
  every: quarter
series:
`;
const series = (...lines: string[]) =>
  `${HEAD}  - name: Paint\n    column: paint\n    unit: litres\n    model: (0,1,1)x(0,1,1)4\n${lines.map((line) => `    ${line}\n`).join('')}`;

const read = (text: string) => parsePlan(text, 'plan.yaml', checkModel);

const faultsOf = (text: string): string[] => {
  try {
    read(text);
  } catch (error) {
    if (error instanceof InputError) return error.message.split('\n');
    throw error;
  }
  throw new Error('was not refused');
};

test('the smallest plan has every default', () => {
  const plan = read(series());
  expect(plan).toMatchObject({ locale: 'en-GB', paper: 'A4', yearStarts: 1, ahead: 4, preparedBy: null });
  expect(plan.series[0]).toMatchObject({
    slug: 'paint',
    places: 0,
    scale: null,
    constant: null,
    events: [],
    purchase: null,
  });
});

test.each([
  ['007', '007'],
  ['1e3', '1e3'],
  ['No', 'No'],
  ['"kg #3"', 'kg #3'],
  ['2026-10-05', '2026-10-05'],
  ['0x1F', '0x1F'],
])('text is taken as typed: %s', (typed, expected) => {
  expect(read(series().replace('unit: litres', `unit: ${typed}`)).series[0].unit).toBe(expected);
});

test.each(['yes', 'no', 'true', 'false'])('switches take %s', (word) => {
  const plan = read(series(`constant: ${word}`).replace('(0,1,1)x(0,1,1)4', '(1,0,0)x(0,1,0)4'));
  expect(plan.series[0].constant).toBe(word === 'yes' || word === 'true');
});

describe('faults are named with line and column, and a remedy', () => {
  test.each([
    [series('colour: red'), /^plan\.yaml:13:5 .*colour/],
    [series('plces: 2'), /^plan\.yaml:13:5 .*plces.*places/],
    [series('places: 9'), /^plan\.yaml:13:13 .*places/],
    [series('scale: root'), /^plan\.yaml:13:12 .*scale "root"/],
    [series('constant: yes'), /^plan\.yaml:13:15 .*constant/],
    [series().replace('(0,1,1)x(0,1,1)4', '(0,1,1)x(0,1,1)12'), /^plan\.yaml:12:12 .*season of 12.*4/],
    [series().replace('issued: 2026-10-05', 'issued: 2026-02-30'), /^plan\.yaml:3:9 .*2026-02-30/],
    [series('events:', '  - what: Flood', '    from: 2020-Q9', '    effect: lasting'), /^plan\.yaml:15:15 .*2020-Q9/],
    [series('events:', '  - what: Flood', '    from: 2020-Q2', '    to: 2020-Q1', '    effect: passing'), /2020-Q1/],
    [series('events:', '  - what: Flood', '    from: 2020-Q2', '    to: 2020-Q3', '    effect: lasting'), /lasting/],
    [`${HEAD}  []\n`, /series/],
    ['heading: [', /^plan\.yaml:\d+:\d+ /],
    ['', /plan/],
    [series().replace('heading: Stores\n', ''), /heading/],
    [series().replace('heading: Stores', 'heading: Stores\nheading: Again'), /^plan\.yaml:2:1 .*heading/],
  ])('case %#', (text, expected) => {
    expect(
      faultsOf(text).find((line) => expected.test(line)),
      faultsOf(text).join('\n'),
    ).toBeDefined();
  });

  test('aliases that multiply are refused, and names like __proto__ are only names', () => {
    const bomb = `a: &a [x,x,x,x,x,x,x,x,x]\nb: &b [*a,*a,*a,*a,*a,*a,*a,*a,*a]\nc: &c [*b,*b,*b,*b,*b,*b,*b,*b,*b]\nd: &d [*c,*c,*c,*c,*c,*c,*c,*c,*c]\ne: [*d,*d,*d,*d,*d,*d,*d,*d,*d]\n`;
    expect(faultsOf(bomb).length).toBeGreaterThan(0);
    expect(
      read(series().replace('name: Paint', 'name: __proto__').replace('column: paint', 'column: __proto__')).series[0],
    ).toMatchObject({
      name: '__proto__',
      column: '__proto__',
    });
  });

  test('slugs are unique and never a shared name', () => {
    const more = (name: string) => `  - name: ${name}\n    column: ${name}x\n    unit: m\n    model: (0,1,1)\n`;
    const plan = read(`${series()}${more('cover')}${more('Paint!')}${more('日本')}`);
    const slugs = plan.series.map(({ slug }) => slug);
    expect(new Set(slugs).size).toBe(4);
    for (const slug of slugs) expect(slug).toMatch(/^[a-z0-9-]+$/);
    expect(slugs).not.toContain('cover');
  });
});
