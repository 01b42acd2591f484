/** `npm run pictures`: accepts all pages as they look now, and says which looked different. */
import { fileURLToPath } from 'node:url';
import { runnerImport } from 'vite';

await runnerImport(fileURLToPath(new URL('accept.ts', import.meta.url)));
