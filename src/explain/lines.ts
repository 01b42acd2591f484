/** Breaking an equation into lines, for a column of 120 mm at 10.5 pt. */

/** The column's width in em of mathematics type, which KaTeX sets 1.21 times the size of the text: 120 mm. */
const COLUMN = 26;

/**
 * `left = first + second − …` in TeX, broken before a term where the line would be longer than the column. Each part
 * but the first begins with its sign.
 */
export function equationTex(left: string, parts: readonly string[]): string {
  const room = COLUMN - breadth(`${left} = `);
  // A weight in brackets that is wider than a line is broken inside the brackets.
  const pieces = parts.flatMap((part) => (breadth(part) > room ? part.split(/ (?=[+-] )/) : [part]));
  const lines = packed(pieces, ' ', room);
  return lines.length === 1
    ? `${left} = ${lines[0]}`
    : `\\begin{aligned} ${left} ={}& ${lines.join(' \\\\ &{}')} \\end{aligned}`;
}

/** `left = right`, both products of brackets: on one line where it fits, else with `right` on lines of its own. */
export function productsTex(left: string, right: string): string {
  if (fits(`${left} = ${right}`)) return `${left} = ${right}`;
  const pieces = (tex: string) => tex.split(/(?<=\))(?=\(|\\)|(?= [+-] )/);
  const room = COLUMN - breadth('= ');
  const lines = [...packed(pieces(left), '', room), ...packed(pieces(`= ${right}`), '', room)];
  return `\\begin{aligned} &${lines.join(' \\\\ &\\quad ')} \\end{aligned}`;
}

/** Pieces joined into lines of at most `room`, but at least one piece a line. */
function packed(pieces: readonly string[], join: string, room: number): string[] {
  const lines: string[] = [];
  let width = Infinity;
  for (const piece of pieces) {
    const next = breadth(piece);
    if (width + next > room) {
      lines.push(piece.trimStart());
      width = next;
    } else {
      lines.push(`${lines.pop() ?? ''}${join}${piece}`);
      width += next;
    }
  }
  return lines;
}

/** Several equations, one a line, aligned at the first `=` of each. */
export function stackedTex(equations: readonly string[]): string {
  if (equations.length === 1) return equations[0];
  return `\\begin{aligned} ${equations.map((equation) => equation.replace(' = ', ' &= ')).join(' \\\\ ')} \\end{aligned}`;
}

/** Whether TeX fits on one line. */
const fits = (tex: string): boolean => breadth(tex) <= COLUMN;

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
