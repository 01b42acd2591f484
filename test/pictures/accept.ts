/** Run by `npm run pictures`. */
import { accept } from './accepted.js';
import { drawPages, isDrawnAlike } from './pages.js';

if (!isDrawnAlike)
  throw new Error(
    'Pictures are accepted where they are drawn alike: on Linux on x64, with PUPPETEER_EXECUTABLE_PATH unset.',
  );
const pages = await drawPages();
const changes = await accept(pages);
console.log(changes.length > 0 ? changes.join('\n') : `All ${pages.size} pages look as accepted.`);
