import katex from 'katex';
import { describe, expect, test } from 'vitest';
import { breadth } from '../../src/explain/lines.js';
import { type Typesettable, typeset } from '../../src/explain/typeset.js';
import { parseForm } from '../../src/sarima/form.js';

/** A model of a form with coefficients 0.5, −0.4, 0.3 … */
function modelOf(text: string, rest: Partial<Typesettable> = {}): Typesettable {
  const form = parseForm(text);
  const values = (count: number) => Array.from({ length: count }, (_, i) => (i % 2 === 0 ? 0.5 : -0.4) / (i + 1));
  return {
    form,
    phi: values(form.p),
    theta: values(form.q),
    Phi: values(form.P),
    Theta: values(form.Q),
    constant: false,
    constantValue: 0,
    scale: 'plain',
    regressors: [],
    ...rest,
  };
}

describe('the equations in TeX', () => {
  test('the textbook’s example, in symbols, in numbers and in its differences', () => {
    // By hand from (1 − Φ₁B⁴)(1 − B) y_t = (1 + θ₁B) ε_t with θ₁ = Φ₁ = 0.5.
    expect(typeset(modelOf('(0,1,1)x(1,0,0)4'))).toEqual({
      variableDefinition: null,
      backshift: '(1 - \\Phi_1B^4)\\nabla y_t = (1 + \\theta_1B)\\varepsilon_t',
      symbols: 'y_t = y_{t-1} + \\Phi_1y_{t-4} - \\Phi_1y_{t-5} + \\varepsilon_t + \\theta_1\\varepsilon_{t-1}',
      numbers: 'y_t = y_{t-1} + 0.5000y_{t-4} - 0.5000y_{t-5} + \\varepsilon_t + 0.5000\\varepsilon_{t-1}',
      differencedDefinition: 'z_t = y_t - y_{t-1}',
      differencedSymbols: 'z_t = \\Phi_1z_{t-4} + \\varepsilon_t + \\theta_1\\varepsilon_{t-1}',
      differencedNumbers: 'z_t = 0.5000z_{t-4} + \\varepsilon_t + 0.5000\\varepsilon_{t-1}',
    });
  });

  test('a constant stands inside the brackets of the backshift form, and as φ(1)Φ(1)c in the expanded one', () => {
    const { backshift, symbols, numbers, differencedDefinition } = typeset(
      modelOf('(1,0,0)', { constant: true, constantValue: 100 }),
    );
    expect(backshift).toBe('(1 - \\phi_1B)(y_t - c) = \\varepsilon_t');
    expect(symbols).toBe('y_t = \\phi_1y_{t-1} + (1 - \\phi_1)c + \\varepsilon_t');
    expect(numbers).toBe('y_t = 0.5000y_{t-1} + 50.000 + \\varepsilon_t');
    expect(differencedDefinition).toBeNull();
    expect(typeset(modelOf('(0,0,0)', { constant: true, constantValue: -3 })).numbers).toBe(
      'y_t = - 3.0000 + \\varepsilon_t',
    );
    expect(typeset(modelOf('(0,0,0)')).symbols).toBe('y_t = \\varepsilon_t');
  });

  test('on other scales, and with events, the variable says what it is', () => {
    expect(typeset(modelOf('(0,1,1)', { scale: 'log' })).symbols).toContain('\\log y_{t-1}');
    expect(typeset(modelOf('(0,1,1)', { scale: 'box-cox 0.3' })).variableDefinition).toBe(
      'y_t^{(0.3)} = (y_t^{0.3} - 1)/0.3',
    );
    const events = typeset(modelOf('(0,1,1)', { scale: 'log', regressors: [0, 0] }));
    expect(events.variableDefinition).toBe('u_t = \\log y_t - \\beta_1 x_{1,t} - \\beta_2 x_{2,t}');
    expect(events.symbols).toContain('u_{t-1}');
  });

  test.each(
    [
      '(2,1,2)x(1,1,1)12',
      '(3,2,3)x(2,2,2)12',
      '(5,0,5)x(2,1,2)53',
      '(0,0,0)x(0,1,0)4',
      '(0,2,0)',
      '(1,1,0)x(1,0,0)2',
      '(12,1,12)x(1,0,1)12',
    ].flatMap((form) => ['plain', 'log', 'box-cox -0.5'].map((scale) => [form, scale] as const)),
  )('%s on the %s scale is set without an error, no line wider than its column', (form, scale) => {
    const texts = Object.values(typeset(modelOf(form, { scale, regressors: [0] })));
    for (const tex of texts) {
      if (tex === null) continue;
      // KaTeX is the judge of the syntax; strict, so that nothing doubtful passes either.
      expect(() => katex.renderToString(tex, { displayMode: true, throwOnError: true, strict: 'error' })).not.toThrow();
      expect(tex).not.toMatch(/NaN|undefined|\+ -|- -|-0\.0+[^\d]/);
      for (const line of tex.split('\\\\'))
        expect(breadth(line.replace(/\\(begin|end)\{aligned\}|&/g, ''))).toBeLessThan(27);
    }
  });
});
