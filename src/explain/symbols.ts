/** How a coefficient is written in TeX: `phi1` is `\phi_1`, `Theta12` is `\Theta_{12}`. */
export function coefficientTex(name: string): string {
  const [, family, index] = /^(phi|theta|Phi|Theta)(\d+)$/.exec(name) ?? [];
  if (family === undefined) throw new Error(`no symbol for a coefficient called "${name}"`);
  return `\\${family}${subscript(index)}`;
}

export function subscript(text: string): string {
  return text.length === 1 ? `_${text}` : `_{${text}}`;
}
