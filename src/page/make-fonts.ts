/** A step of the build: cuts the fonts that nearly every brief needs, once for all runs. */
import { clearFonts, keepFont } from '../charts/made-fonts.js';
import { openFaces, styles } from '../charts/typefaces.js';
import { plainFonts } from './type.js';

await clearFonts();
for (const style of styles) for (const { name, data } of await openFaces(style)) await keepFont(`${name}.ttf`, data);
for (const { name, data } of await plainFonts()) await keepFont(name, data);
