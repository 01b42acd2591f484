/** A thread that draws briefs, one after another, for the thread that asks for them. */
import { parentPort } from 'node:worker_threads';
import { renderBrief } from '../page/brief.js';
import { loadTheme, type Theme } from '../page/theme.js';
import type { BriefRecord } from '../record/record.js';

export interface BriefPage {
  readonly record: BriefRecord;
  /** SHA-256 of the record's file. */
  readonly fingerprint: string;
  /** The folder of the user's own templates that it was made with; null where there were none. */
  readonly own: string | null;
}

export interface DrawTask {
  readonly id: number;
  readonly page: BriefPage;
}

export type Drawn = { readonly id: number } & ({ readonly html: string } | { readonly why: string });

const themes = new Map<string, Promise<Theme>>();

function themeOf({ record, own }: BriefPage): Promise<Theme> {
  const { locale } = record.plan;
  const key = `${locale} ${own}`;
  const theme = themes.get(key) ?? loadTheme(locale, own);
  themes.set(key, theme);
  return theme;
}

async function drawn({ id, page }: DrawTask): Promise<Drawn> {
  try {
    const { record, fingerprint } = page;
    return { id, html: await renderBrief(record, await themeOf(page), { fingerprint, trial: false }) };
  } catch (error) {
    return { id, why: error instanceof Error ? error.message : String(error) };
  }
}

parentPort?.on('message', async (task: DrawTask) => parentPort?.postMessage(await drawn(task)));
