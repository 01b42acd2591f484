/** From a Vega-Lite specification to SVG: no browser, the same bytes each time. */
import * as vega from 'vega';
import { compile, type TopLevelSpec } from 'vega-lite';
import { config, properties } from './look.js';
import { openTextWidth } from './metrics.js';

export interface ChartLook {
  /** What the chart shows, for whoever can't see it. */
  readonly described: string;
}

/** Draws a chart as one `<svg>` element with its text alternative. */
export async function draw(spec: TopLevelSpec, { described }: ChartLook): Promise<string> {
  await measureText();
  const { spec: compiled } = compile({ ...spec, config } as TopLevelSpec);
  const view = new vega.View(vega.parse(compiled), { renderer: 'none', logger: vega.logger(vega.Error) });
  const svg = await view.toSVG();
  view.finalize();
  return Object.entries(properties)
    .reduce((text, [colour, property]) => text.replaceAll(`"${colour}"`, `"var(${property}, ${colour})"`), svg)
    .replace(/ aria-(?:label|roledescription|hidden)="[^"]*"| role="graphics-[a-z]+"/g, '')
    .replace(/^<svg /, `<svg role="img" aria-label="${escaped(described)}" preserveAspectRatio="xMinYMid meet" `);
}

const escaped = (text: string): string =>
  text.replaceAll('&', '&amp;').replaceAll('"', '&quot;').replaceAll('<', '&lt;').replaceAll('>', '&gt;');

interface TextItem {
  readonly text?: unknown;
  readonly fontSize?: number;
  readonly fontWeight?: number | string;
  readonly fontStyle?: string;
  readonly limit?: number;
}

let measured = false;

/** Without a canvas Vega guesses how wide text is; the embedded type knows. */
async function measureText(): Promise<void> {
  if (measured) return;
  const width = await openTextWidth();
  const metrics = (vega as unknown as { textMetrics: { width: (item: TextItem, text?: string) => number } })
    .textMetrics;
  metrics.width = (item, text) => {
    const style = {
      family: 'sans' as const,
      size: item.fontSize ?? 11,
      weight: item.fontWeight === 'bold' ? 600 : Number(item.fontWeight ?? 400) || 400,
      italic: item.fontStyle === 'italic',
    };
    const wide = width(String(text ?? item.text ?? ''), style);
    return item.limit !== undefined && item.limit > 0 ? Math.min(wide, item.limit) : wide;
  };
  measured = true;
}

/** A function of the compiled chart's text marks: a number in the locale's format, ready made as a label. */
export const labelled = (values: readonly number[], format: (value: number) => string): string =>
  `${values.map((value) => `datum.value === ${value} ? ${JSON.stringify(format(value))}`).join(' : ')} : ''`;
