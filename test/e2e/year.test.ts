/**
 * A year of life: four quarterly briefs of one series, each with one more quarter of figures; the second with an order
 * and a judgement to look back on, the third with a corrected figure, the fourth with another model. The model is last
 * year's figure again until then, so that every part of the look back can be worked out by hand.
 */
import { cp, mkdir, mkdtemp, readdir, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { writeBriefs } from '../../src/commands/write.js';
import { type BriefRecord, recordSchema } from '../../src/record/record.js';
import { withoutFonts } from './looked-at.js';

const starter = fileURLToPath(new URL('../../templates/starter', import.meta.url));
const QUARTERS = ['2025-Q4', '2026-Q1', '2026-Q2', '2026-Q3'];
const ISSUES = ['2026-01-05', '2026-04-06', '2026-07-06', '2026-10-05'];
/** What the accounts first said of 2025-Q4, and what they say from July 2026 on. */
const [FIRST_SAID, CORRECTED] = [220, 214];
const ORDER =
  '    purchase: { covers: 2, not-short: 90%, in-stock: 40, pack: 24, decided: 50 packs, because: A full pallet }\n';
const JUDGEMENT =
  '    judgement: [{ what: A race week, from: 2026-Q2, to: 2026-Q3, change: +10%, because: Forty boats are entered }]\n';

let folder: string;
const place = () => join(folder, 'year');
const out = () => join(place(), 'out');
const figures = new Map<string, number>();

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'year-'));
  await cp(starter, place(), { recursive: true });
  const lines = (await readFile(join(starter, 'figures.csv'), 'utf8')).trim().split('\n');
  for (const line of lines.slice(1)) {
    const [quarter, paint] = line.split(',');
    if (paint !== '') figures.set(quarter, Number(paint));
  }
  expect(figures.get('2025-Q4')).toBe(CORRECTED);
  for (const [i, issued] of ISSUES.entries()) await issue(issued, i);
}, 120_000);
afterAll(() => rm(folder, { recursive: true, force: true }));

async function issue(issued: string, i: number, series = 'Antifouling paint', more = ''): Promise<void> {
  const shown = [...figures].filter(([quarter]) => quarter <= QUARTERS[i]);
  const asKnown = shown.map(([quarter, paint]) => [quarter, quarter === '2025-Q4' && i < 2 ? FIRST_SAID : paint]);
  await writeFile(join(place(), 'figures.csv'), `quarter,paint\n${asKnown.map((row) => row.join(',')).join('\n')}\n`);
  await writeFile(
    join(place(), 'plan.yaml'),
    `heading: Stores outlook
prepared-for: Saltmarsh Boatyard
issued: ${issued}
ahead: 4
figures: { file: figures.csv, period: quarter, every: quarter }
series:
  - name: ${series}
    column: paint
    unit: litres
    model: ${i < 3 ? '(0,0,0)x(0,1,0)4' : '(0,1,1)x(0,1,1)4'}
${i === 1 ? ORDER + JUDGEMENT : ''}${more}`,
  );
  const { failures } = await writeBriefs(join(place(), 'plan.yaml'), { pdf: false });
  expect(failures).toEqual([]);
}

const filed = async (issued: string, slug = 'antifouling-paint'): Promise<BriefRecord> =>
  recordSchema.parse(JSON.parse(await readFile(join(out(), issued, `${slug}.json`), 'utf8')));
/** Paths are held at zero, which moves what is expected of a small quarter by a little. */
const near = (value: number, expected: number) => expect(Math.abs(value - expected)).toBeLessThan(0.2);
const paint = (quarter: string): number => figures.get(quarter) ?? Number.NaN;

test('the first brief has nothing to look back on', async () => {
  expect((await filed(ISSUES[0])).lookBack).toBeNull();
});

describe('the last brief', () => {
  test('scores every earlier forecast that is known now', async () => {
    const { lookBack } = await filed(ISSUES[3]);
    expect(lookBack?.earlier.map(({ brief, known }) => [brief, known])).toEqual([
      ['2026-01-05/antifouling-paint', 3],
      ['2026-04-06/antifouling-paint', 2],
      ['2026-07-06/antifouling-paint', 1],
    ]);
    // Expected was last year's figure; the second brief's judgement put 10% on both of its known quarters.
    const forecasts = [
      [paint('2025-Q1'), paint('2026-Q1')],
      [paint('2025-Q2'), paint('2026-Q2')],
      [paint('2025-Q3'), paint('2026-Q3')],
      [1.1 * paint('2025-Q2'), paint('2026-Q2')],
      [1.1 * paint('2025-Q3'), paint('2026-Q3')],
      [paint('2025-Q3'), paint('2026-Q3')],
    ];
    const missed = forecasts.reduce((sum, [expected, actual]) => sum + Math.abs(expected - actual), 0);
    const happened = forecasts.reduce((sum, [, actual]) => sum + actual, 0);
    expect(lookBack?.running?.count).toBe(6);
    expect(lookBack?.running?.miss).toBeCloseTo(missed / happened, 4);
    // Counted again from the filed records themselves.
    const records = await Promise.all(ISSUES.slice(0, 3).map((issued) => filed(issued)));
    const inside = records.flatMap(({ outlook }) =>
      outlook.periods.filter(({ period, range80: [low, high] }) => paint(period) >= low && paint(period) <= high),
    );
    expect(lookBack?.running?.inside80).toBe(inside.length);
    expect(lookBack?.last.map(({ period, actual }) => [period, actual])).toEqual([['2026-Q3', paint('2026-Q3')]]);
  });

  test('tells how the order and the judgement of the second one turned out', async () => {
    const { lookBack } = await filed(ISSUES[3]);
    const needed = paint('2026-Q2') + paint('2026-Q3');
    expect(lookBack?.order).toMatchObject({
      issued: '2026-04-06',
      span: ['2026-Q2', '2026-Q3'],
      ordered: 1200,
      isDecided: true,
      demand: needed,
      leftOver: 40 + 1200 - needed,
      lost: 0,
    });
    const [before, after] = [
      [paint('2025-Q2'), paint('2026-Q2')],
      [paint('2025-Q3'), paint('2026-Q3')],
    ];
    const misses = (factor: number) => [before, after].reduce((sum, [was, is]) => sum + Math.abs(factor * was - is), 0);
    expect(lookBack?.judgement).toMatchObject({ issued: '2026-04-06', what: ['A race week'] });
    expect(lookBack?.judgement?.withIt).toBeCloseTo(misses(1.1), 3);
    expect(lookBack?.judgement?.without).toBeCloseTo(misses(1), 3);
  });

  test('puts the change down to the model, which alone changed what is expected', async () => {
    const record = await filed(ISSUES[3]);
    const change = record.lookBack?.change;
    expect(change?.issued).toBe('2026-07-06');
    expect(change?.periods.map(({ period }) => period)).toEqual(['2026-Q4', '2027-Q1', '2027-Q2']);
    change?.periods.forEach(({ period, was, now, parts }, h) => {
      const lastYear = paint(`${Number(period.slice(0, 4)) - 1}${period.slice(4)}`);
      near(was, lastYear);
      expect(now).toBe(record.outlook.periods[h].expected);
      for (const part of ['program', 'revised', 'observed', 'estimated'] as const) near(parts[part], 0);
      near(parts.model, now - lastYear);
    });
  });
});

test('the third brief puts the change down to the corrected figure and to the judgement that is gone', async () => {
  const { lookBack } = await filed(ISSUES[2]);
  expect(lookBack?.change?.periods.map(({ period }) => period)).toEqual(['2026-Q3', '2026-Q4', '2027-Q1']);
  const [third, fourth, first] = lookBack?.change?.periods ?? [];
  // The race week's 10% on 2026-Q3 has no place in the new plan.
  near(third.parts.model, -0.1 * paint('2025-Q3'));
  expect(third.parts.revised).toBeCloseTo(0, 6);
  // 2026-Q4 repeats 2025-Q4, which was corrected.
  near(fourth.parts.revised, CORRECTED - FIRST_SAID);
  near(first.now, first.was);
});

test('in every brief the parts add up to the change, in full and as printed', async () => {
  for (const issued of ISSUES.slice(1)) {
    const { lookBack } = await filed(issued);
    const change = lookBack?.change;
    if (change === undefined || change === null) throw new Error(`${issued} tells no change`);
    for (const { was, now, parts } of [...change.periods, change.total])
      expect(Object.values(parts).reduce((sum, part) => sum + part, was)).toBeCloseTo(now, 9);
    const { was, now, parts } = change.printed;
    expect(Object.values(parts).reduce((sum, part) => sum + part, was)).toBe(now);
  }
});

test('page 1 tells of the last brief, the checks of the change; nothing on the pages is no number', async () => {
  const html = await readFile(join(out(), ISSUES[3], 'antifouling-paint.html'), 'utf8');
  expect(html).toMatch(/The brief of 6 July 2026 expected \d+ for Jul.*2026; it came to 521/);
  expect(html).toMatch(/How earlier briefs turned out/);
  expect(html).toMatch(/left \d+ over: 1,102 were needed/);
  expect(withoutFonts(html)).not.toMatch(/NaN|undefined|Infinity/);
});

test('a renamed series finds its earlier briefs; another unit is said, not compared', async () => {
  await issue('2026-10-12', 3, 'Hull paint', '    formerly: Antifouling paint\n');
  const renamed = await filed('2026-10-12', 'hull-paint');
  expect(renamed.lookBack?.earlier).toHaveLength(4);
  await issue('2026-10-19', 3, 'Hull paint', '    formerly: [Antifouling paint]\n');
  expect((await filed('2026-10-19', 'hull-paint')).lookBack?.earlier).toHaveLength(5);
  const plan = join(place(), 'plan.yaml');
  await writeFile(
    plan,
    (await readFile(plan, 'utf8')).replace('unit: litres', 'unit: tins').replace('2026-10-19', '2026-10-26'),
  );
  await writeBriefs(plan, { pdf: false });
  const { lookBack } = await filed('2026-10-26', 'hull-paint');
  expect(lookBack?.earlier).toEqual([]);
  expect(lookBack?.unlike.map(({ reason }) => reason)).toEqual(Array(6).fill('unit'));
  expect(await readFile(join(out(), '2026-10-26', 'hull-paint.html'), 'utf8')).toMatch(
    /6 earlier briefs are not compared: another unit\./,
  );
});

test('an earlier record that can’t be read is named and left out', async () => {
  const copy = join(folder, 'damaged');
  await mkdir(copy);
  await cp(place(), copy, { recursive: true });
  await writeFile(join(copy, 'out', ISSUES[0], 'antifouling-paint.json'), '{');
  const plan = join(copy, 'plan.yaml');
  await writeFile(
    plan,
    (await readFile(plan, 'utf8'))
      .replace('unit: tins', 'unit: litres')
      .replace('name: Hull paint', 'name: Antifouling paint')
      .replace(/ {4}formerly.*\n/, '')
      .replace('2026-10-26', '2026-11-02'),
  );
  const said: string[] = [];
  const report = { message: (text: string) => said.push(text), progress: () => undefined };
  await writeBriefs(plan, { pdf: false, report });
  expect(said.join('\n')).toMatch(/2026-01-05.antifouling-paint\.json .* can't be read as a record/);
  expect(await readdir(join(copy, 'out', '2026-11-02'))).toContain('antifouling-paint.json');
});
