/** The model's equations in TeX: the backshift form, the expanded form in symbols and in numbers, and what z is. */
import type { Form } from '../sarima/form.js';
import {
  type Expandable,
  type Expansion,
  expand,
  expandDifferenced,
  type LagTerm,
  undoDifferences,
  weightTex,
} from './expand.js';
import { equationTex, productsTex, stackedTex } from './lines.js';
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
  return productsTex(left, `${movingAverage}\\varepsilon_t`);
}

/** 1 − φ₁B − φ₂B² in brackets, with spacing 0 its value at B = 1; nothing where the order is 0. */
function factorTex(family: string, order: number, spacing: number, sign: '+' | '-'): string {
  if (order === 0) return '';
  const terms = Array.from({ length: order }, (_, i) => {
    const power = (i + 1) * spacing;
    const shift = power === 0 ? '' : `B${power === 1 ? '' : superscript(`${power}`)}`;
    return ` ${sign} ${coefficientTex(`${family}${i + 1}`)}${shift}`;
  });
  return `(1${terms.join('')})`;
}

const superscript = (text: string): string => (text.length === 1 ? `^${text}` : `^{${text}}`);

function nablaTex(order: number, spacing: number): string {
  if (order === 0) return '';
  const nabla = spacing === 1 ? '\\nabla' : `\\nabla${subscript(`${spacing}`)}`;
  return order === 1 ? nabla : `${nabla}${superscript(`${order}`)}`;
}

/** z in terms of the variable: z_t = y_t − y_{t−4}. */
function definitionTex(form: Form, y: Variable): string {
  const terms = undoDifferences(form).map((term) =>
    signed(-term.weight, (size) => (size === 1 ? '' : `${size}`), y(term.lag)),
  );
  return equationTex('z_t', [y(0), ...terms]);
}

/** How an equation's weights are written: as symbols or as numbers. Each part begins with its sign. */
interface Writing {
  readonly term: (term: LagTerm, variable: string) => string;
  readonly constant: string;
}

function symbolic({ form, constant }: Typesettable): Writing {
  const atOne = [factorTex('phi', form.p, 0, '-'), factorTex('Phi', form.P, 0, '-')].join('');
  return {
    term: ({ products }, variable) => {
      if (products.length > 1) return `+ (${weightTex(products)})${variable}`;
      const weight = weightTex(products);
      if (weight === '1' || weight === '-1') return `${weight === '1' ? '+' : '-'} ${variable}`;
      return weight.startsWith('-') ? `- ${weight.slice(1)}${variable}` : `+ ${weight}${variable}`;
    },
    constant: constant ? `+ ${atOne}c` : '',
  };
}

function numeric(model: Typesettable): Writing {
  const { constant } = expand(model);
  return {
    term: ({ weight }, variable) => signed(weight, (size) => (size === 1 ? '' : significant(size, 4)), variable),
    constant: model.constant ? signed(constant, (size) => significant(size, 5), '') : '',
  };
}

function signed(weight: number, size: (size: number) => string, variable: string): string {
  return `${weight < 0 ? '-' : '+'} ${size(Math.abs(weight))}${variable}`;
}

/** To so many significant digits, never in exponent form and never finer than ten decimal places. */
function significant(number: number, digits: number): string {
  if (number === 0) return '0';
  const places = Math.min(Math.max(digits - 1 - Math.floor(Math.log10(number)), 0), 10);
  return number.toFixed(places);
}

function expandedTex(model: Typesettable, { lags, surprises }: Expansion, y: Variable, writing: Writing): string {
  const parts = [
    ...lags.map((term) => writing.term(term, y(term.lag))),
    ...(model.constant ? [writing.constant] : []),
    '+ \\varepsilon_t',
    ...surprises.map((term) => writing.term(term, `\\varepsilon${at(term.lag)}`)),
  ];
  return equationTex(y(0), [parts[0].replace(/^\+ /, ''), ...parts.slice(1)]);
}
