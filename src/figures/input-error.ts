/** The one error for input that can't be used: the plan's or the figures', with every fault found in one go. */

/** Where something stands. Line and column count from 1; in a file of figures, column is the number of the field. */
export interface Place {
  readonly file: string;
  /** Null where the fault is the whole file's. */
  readonly line: number | null;
  readonly column: number | null;
}

export interface Fault extends Place {
  /** What is wrong, what stands there and what to do. */
  readonly message: string;
}

export class InputError extends Error {
  override readonly name = 'InputError';
  readonly faults: readonly Fault[];

  /** The error's message is one line a fault, in the order given. */
  constructor(faults: readonly Fault[]) {
    super(faults.map(faultLine).join('\n'));
    this.faults = faults;
  }
}

/** `plan.yaml:23:5 what is wrong`. */
export const faultLine = ({ file, line, column, message }: Fault): string =>
  `${[file, line, column].filter((part) => part !== null).join(':')} ${message}`;

const longestShown = 60;

/** What stands in a file, as a message shows it: in quotes, on one line, and cut short where it is long. */
export const shown = (text: string): string => {
  const characters = [...text];
  const cut = characters.length > longestShown ? `${characters.slice(0, longestShown).join('')}…` : text;
  // Control and formatting characters would break the line or hide; they are shown by their number.
  const visible = cut.replace(/[\p{Cc}\p{Cf}\p{Cs}\p{Zl}\p{Zp}]/gu, (character) => {
    const named: Readonly<Record<string, string>> = { '\n': '\\n', '\r': '\\r', '\t': '\\t' };
    return named[character] ?? `\\u{${(character.codePointAt(0) ?? 0).toString(16)}}`;
  });
  return `"${visible}"`;
};
