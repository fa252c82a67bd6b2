/** What people at the terminal can mend: printed as one sentence, without a trace. */
export class SetUpError extends Error {
  override readonly name = "SetUpError";
}
