/** Breaking an equation into lines, for a column of 120 mm at 10.5 pt. */

/** The column's width in em of mathematics type, which KaTeX sets 1.21 times the size of the text: 120 mm. */
const COLUMN = 26;

/**
 * `left = first + second − …` in TeX, broken before a term where the line would be longer than the column. Each part
 * but the first begins with its sign.
 */
export function equationTex(left: string, parts: readonly string[]): string {
  const indent = breadth(`${left} = `);
  const lines: string[] = [];
  let [line, width] = ['', indent];
  for (const part of parts) {
    const next = breadth(part);
    if (line !== '' && width + next > COLUMN) {
      lines.push(line);
      [line, width] = [part, indent + next];
    } else {
      line = line === '' ? part : `${line} ${part}`;
      width += next;
    }
  }
  lines.push(line);
  return lines.length === 1
    ? `${left} = ${line}`
    : `\\begin{aligned} ${left} ={}& ${lines.join(' \\\\ &{}')} \\end{aligned}`;
}

/** Several equations, one a line, aligned at the first `=` of each. */
export function stackedTex(equations: readonly string[]): string {
  if (equations.length === 1) return equations[0];
  return `\\begin{aligned} ${equations.map((equation) => equation.replace(' = ', ' &= ')).join(' \\\\ ')} \\end{aligned}`;
}

/** Whether TeX fits on one line. */
export const fits = (tex: string): boolean => breadth(tex) <= COLUMN;

/** About how wide TeX is set, in em: from the widths of Computer Modern's characters. */
export function breadth(tex: string): number {
  const tokens = tex.match(/[_^]\{[^}]*\}|[_^](?:\\[A-Za-z]+|.)|\\[A-Za-z]+|\S/g) ?? [];
  return tokens.reduce((sum, token) => sum + tokenBreadth(token), 0);
}

/** Sub- and superscripts are set at 0.7 of the size, signs in them without the space round them. */
const SCRIPT = 0.7;

function tokenBreadth(token: string): number {
  if (/^[_^]/.test(token)) {
    const inside = token.slice(1).replace(/^\{|\}$/g, '');
    const spaceless = inside.replace(/[-+]/g, '').length;
    return SCRIPT * (breadth(inside.replace(/[-+]/g, '')) + 0.78 * (inside.length - spaceless));
  }
  return WIDTHS[token] ?? (/^\d$/.test(token) ? 0.5 : 0.58);
}

const WIDTHS: Readonly<Record<string, number>> = {
  '+': 1.23,
  '-': 1.23,
  '=': 1.34,
  '.': 0.28,
  ',': 0.45,
  '(': 0.39,
  ')': 0.39,
  '[': 0.28,
  ']': 0.28,
  '{': 0,
  '}': 0,
  t: 0.36,
  y: 0.53,
  z: 0.51,
  B: 0.8,
  '\\log': 1.45,
  '\\nabla': 0.83,
  '\\varepsilon': 0.47,
};
