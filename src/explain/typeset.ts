/** The model's equations in TeX: the backshift form, the expanded form in symbols and in numbers, and what z is. */
import type { Form } from '../sarima/form.js';
import { type Expandable, type LagTerm, expand, expandDifferenced, undoDifferences, weightTex } from './expand.js';
import { equationTex, stackedTex } from './lines.js';
import { coefficientTex, subscript } from './symbols.js';

/** What is typeset: the model, its scale (`plain`, `log`, `box-cox 0.3`) and how many regressors it has. */
export interface Typesettable extends Expandable {
  readonly scale: string;
  readonly regressors: { readonly length: number };
}

export interface EquationTex {
  readonly variableDefinition: string | null;
  readonly backshift: string;
  readonly symbols: string;
  readonly numbers: string;
  readonly differencedDefinition: string | null;
  readonly differencedSymbols: string | null;
  readonly differencedNumbers: string | null;
}

export function typeset(model: Typesettable): EquationTex {
  const { form } = model;
  const y = variable(model);
  const z: Variable = (lag) => `z${at(lag)}`;
  const isDifferenced = form.d + form.D > 0;
  return {
    variableDefinition: variableDefinition(model),
    backshift: backshiftTex(model, y),
    symbols: expandedTex(model, expand(model), y, symbolic(model)),
    numbers: expandedTex(model, expand(model), y, numeric(model)),
    differencedDefinition: isDifferenced ? definitionTex(form, y) : null,
    differencedSymbols: isDifferenced ? expandedTex(model, expandDifferenced(model), z, symbolic(model)) : null,
    differencedNumbers: isDifferenced ? expandedTex(model, expandDifferenced(model), z, numeric(model)) : null,
  };
}

/** The variable's TeX so many periods back. */
type Variable = (lag: number) => string;

const at = (lag: number): string => subscript(lag === 0 ? 't' : `t-${lag}`);

/** y, log y or Box & Cox's y^(λ); u where effects are taken off it first. */
function variable(model: Typesettable): Variable {
  return model.regressors.length > 0 ? (lag) => `u${at(lag)}` : scaledVariable(model.scale);
}

function scaledVariable(scale: string): Variable {
  if (scale === 'plain') return (lag) => `y${at(lag)}`;
  if (scale === 'log') return (lag) => `\\log y${at(lag)}`;
  return (lag) => `y${at(lag)}^{(${exponent(scale)})}`;
}

const exponent = (scale: string): string => `${Number(scale.split(/\s+/)[1])}`;

/** Null where the variable is y or log y. */
function variableDefinition({ scale, regressors }: Typesettable): string | null {
  const definitions: string[] = [];
  const scaled = scaledVariable(scale)(0);
  if (regressors.length > 0) {
    const effects = Array.from({ length: regressors.length }, (_, i) => {
      const number = `${i + 1}`;
      return `- \\beta${subscript(number)} x_{${number},t}`;
    });
    definitions.push(equationTex('u_t', [scaled, ...effects]));
  }
  if (scale.startsWith('box-cox')) {
    const lambda = exponent(scale);
    definitions.push(`${scaled} = (y_t^{${lambda}} - 1)/${lambda.startsWith('-') ? `(${lambda})` : lambda}`);
  }
  return definitions.length === 0 ? null : stackedTex(definitions);
}

/** φ(B)Φ(Bᵐ)(∇ᵈ∇ₘᴰ y_t − c) = θ(B)Θ(Bᵐ)ε_t, factor by factor. */
function backshiftTex({ form, constant }: Typesettable, y: Variable): string {
  const { p, d, q, P, D, Q, m } = form;
  const autoregressive = [factorTex('phi', p, 1, '-'), factorTex('Phi', P, m, '-')].join('');
  const movingAverage = [factorTex('theta', q, 1, '+'), factorTex('Theta', Q, m, '+')].join('');
  const nablas = `${nablaTex(d, 1)}${nablaTex(D, m)}`;
  const differenced = nablas === '' ? y(0) : `${nablas} ${y(0)}`;
  const centred = constant ? `${differenced} - c` : differenced;
  const left = constant && autoregressive !== '' ? `${autoregressive}(${centred})` : `${autoregressive}${centred}`;
  return splitAtEquals(left, `${movingAverage}\\varepsilon_t`);
}

/** 1 − φ₁B − φ₂B² in brackets; nothing where the order is 0. */
function factorTex(family: string, order: number, spacing: number, sign: '+' | '-'): string {
  if (order === 0) return '';
  const terms = Array.from({ length: order }, (_, i) => {
    const power = (i + 1) * spacing;
    return ` ${sign} ${coefficientTex(`${family}${i + 1}`)}B${power === 1 ? '' : superscript(`${power}`)}`;
  });
  return `(1${terms.join('')})`;
}

const superscript = (text: string): string => (text.length === 1 ? `^${text}` : `^{${text}}`);

function nablaTex(order: number, spacing: number): string {
  if (order === 0) return '';
  const nabla = spacing === 1 ? '\\nabla' : `\\nabla${subscript(`${spacing}`)}`;
  return order === 1 ? nabla : `${nabla}${superscript(`${order}`)}`;
}

/** A backshift form too long for a line has its right-hand side on the next. */
function splitAtEquals(left: string, right: string): string {
  return equationTex(left, [right]).length === 0 || fits(`${left} = ${right}`)
    ? `${left} = ${right}`
    : `\\begin{aligned} &${left} \\\\ &\\quad = ${right} \\end{aligned}`;
}
