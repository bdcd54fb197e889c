const EXPRESSIONS =
  'integers, fractions and terminating decimals with + - * / ^ (integer powers), parentheses, sqrt( ), cbrt( ), pi and e, such as "sqrt(2)-1"';

/** What is wrong with the text or the polynomial of an exact number, and what is accepted. */
export class ExactFault extends Error {
  override readonly name = "ExactFault";
  constructor(
    message: string,
    readonly accepted: string = EXPRESSIONS,
    /** Where inside a polynomial number, as a JSON Pointer. */
    readonly path: string = "",
  ) {
    super(message);
  }
}
