/** R itself, in WebAssembly: the reference that tests call live. */
import { WebR } from 'webr';

export interface R {
  /** A numeric vector; NaN where R has NA. */
  readonly numbers: (expression: string) => Promise<number[]>;
  readonly close: () => Promise<void>;
}

export async function openR(): Promise<R> {
  const r = new WebR({ interactive: false });
  await r.init();
  return {
    // As text, since R's numbers with gaps in them can't be handed over as numbers.
    numbers: async (expression) => {
      const text = await r.evalRString(
        `paste(formatC(as.numeric(${expression}), digits = 17, format = "g"), collapse = " ")`,
      );
      return text.trim().split(/\s+/).map(Number);
    },
    close: async () => r.close(),
  };
}
