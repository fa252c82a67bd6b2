/** Class names that hold, in order. */
export const joinClasses = (...names: readonly (string | false | null | undefined)[]): string =>
  names.filter(Boolean).join(" ");
