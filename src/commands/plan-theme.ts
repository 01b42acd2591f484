/** The templates and words that a plan asks for. */
import { InputError } from '../figures/input-error.js';
import { loadTheme, type Theme } from '../page/theme.js';
import type { Plan } from '../plan/plan.js';

/** Throws an InputError at the plan's `templates` where its folder or a file in it can't be used. */
export async function planTheme({ locale, templates, templatesAt }: Plan): Promise<Theme> {
  try {
    return await loadTheme(locale, templates);
  } catch (error) {
    if (templates === null || !(error instanceof Error)) throw error;
    const isMissing = 'code' in error && (error.code === 'ENOENT' || error.code === 'ENOTDIR');
    const message = isMissing
      ? 'templates: there is no such folder; give its path from the plan’s folder, or leave templates out'
      : error.message;
    throw new InputError([{ ...templatesAt, message }]);
  }
}
