/** A value that the method reproduces; `tests/reference/methods-page.test.ts` computes each anew. */
export interface CheckValue {
  /** Names the check for the test. */
  readonly id: string;
  readonly what: string;
  /** As it is printed, to the digits the source gives. */
  readonly value: string;
  readonly source: string;
}

/** One method as its page tells it. Formulas and symbols are TeX, turned to MathML by the server. */
export interface Method {
  /** The anchor that labels elsewhere link to. */
  readonly id: string;
  readonly name: string;
  /** What it decides in the product: the first thing to know. */
  readonly decides: string;
  readonly formulas: readonly string[];
  readonly symbols: readonly (readonly [tex: string, meaning: string])[];
  readonly assumes: readonly string[];
  readonly source: string;
  readonly checks: readonly CheckValue[];
}

export interface MethodGroup {
  readonly id: string;
  readonly title: string;
  readonly methods: readonly Method[];
}
