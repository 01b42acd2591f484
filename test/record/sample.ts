/** A made-up record of Saltmarsh Boatyard, small and valid, for tests of what is done with records. */
import { type BriefRecord, recordSchema } from '../../src/record/record.js';

export interface SampleChanges {
  readonly slug?: string;
  readonly name?: string;
  readonly issued?: string;
  readonly preparedFor?: string;
  readonly values?: readonly (number | null)[];
  readonly expected?: number;
}

export function sampleRecord(changes: SampleChanges = {}): BriefRecord {
  const { slug = 'antifouling-paint', name = 'Antifouling paint', issued = '2026-10-05', expected = 240 } = changes;
  const term = { lag: 4, weight: 1, tex: '1' };
  const printedRow = { expected, range80: [200, 280], range95: [180, 300], lastYear: 240, change: 0 } as const;
  return recordSchema.parse({
    format: 'seasonbrief-record/1',
    brief: `${issued}/${slug}`,
    issued,
    software: { name: 'seasonbrief', version: '0.1.0' },
    plan: {
      heading: 'Stores outlook',
      preparedFor: changes.preparedFor ?? 'Saltmarsh Boatyard',
      preparedBy: null,
      locale: 'en-GB',
      currency: 'GBP',
      paper: 'A4',
      yearStarts: 1,
      templates: '0'.repeat(64),
    },
    series: { name, slug, formerly: [], unit: 'litres', places: 0, every: 'quarter', season: 4 },
    figures: {
      start: '2025-Q1',
      values: changes.values ?? [212, 250, 310, 240],
      sha256: '1'.repeat(64),
      findings: [],
      events: [],
      soldOut: [],
      regressors: [],
    },
    model: {
      form: '(0,0,0)x(0,1,0)4',
      scale: 'plain',
      constant: false,
      fittedBy: 'maximum-likelihood',
      priors: null,
      chosenBy: 'planner',
      reason: null,
      advice: null,
    },
    fit: {
      coefficients: [],
      innovationVariance: 100,
      logLikelihood: -20,
      aicc: null,
      observations: 0,
      residuals: [null, null, null, null],
      standardizedResiduals: [null, null, null, null],
      effectiveCoefficients: 0,
      unrestricted: null,
      demand: [],
      settled: true,
      nearUnitRoots: [],
      nearlyCancels: false,
      autocorrelations: [],
      autocorrelationBound: 0.98,
    },
    equation: {
      lags: [term],
      surprises: [],
      constant: 0,
      differenced: { definition: { regular: 0, seasonal: 1, season: 4 }, lags: [], surprises: [], constant: 0 },
      tex: {
        variableDefinition: null,
        backshift: 'x',
        symbols: 'x',
        numbers: 'x',
        differencedDefinition: null,
        differencedSymbols: null,
        differencedNumbers: null,
      },
      workedSum: {
        period: '2026-Q1',
        variable: 'value',
        unit: 'units',
        decimals: { product: 0, total: 0 },
        terms: [],
        total: expected,
        back: [],
        expected,
      },
      weights: [{ lag: 4, weight: 1 }],
      echo: [{ step: 0, effect: 1 }],
      meanings: [],
    },
    outlook: {
      seed: 1,
      paths: 10000,
      periods: [
        { period: '2026-Q1', expected, middle: expected, range80: [200, 280], range95: [180, 300], standardError: 10 },
      ],
      totals: [],
      heldAtZero: true,
      calibration: { freedom: 12, factors: { freedom: 1, recent: 1, estimates: [1], horizon: [1] } },
    },
    printed: {
      places: 0,
      step: 1,
      periods: [printedRow],
      years: [],
      total: printedRow,
      answer: { places: 0, step: 1, expected, range80: [200, 280], lastYear: 240, change: 0 },
    },
    facts: {
      direction: { kind: 'unknown', perYear: null, years: 1, span: null },
      season: null,
      surprise: null,
      relativeRange: null,
      caveats: [],
    },
    assumptions: [],
    trackRecord: null,
    judgement: null,
    purchase: null,
    budget: null,
    lookBack: null,
  });
}
