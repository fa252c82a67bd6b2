import type { UseQueryResult } from "@tanstack/react-query";

export interface LoadFailure {
  error: Error;
  /** Asks again for what is missing, and for nothing else. */
  retry: () => void;
}

/**
 * What a screen lacks to show anything. An answer that is there stays on the screen although asking
 * for it anew failed: a lost connection takes nothing away.
 *
 * @returns null where everything that was asked for is here, or still on its way.
 */
export function findLoadFailure(
  queries: readonly Pick<UseQueryResult, "error" | "isLoadingError" | "refetch">[],
): LoadFailure | null {
  const missing = queries.filter((query) => query.isLoadingError);
  const error = missing[0]?.error ?? null;
  if (error === null) return null;
  return { error, retry: () => missing.forEach((query) => void query.refetch()) };
}
