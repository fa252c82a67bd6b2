/**
 * Runs an act when asked to, never twice at a time; whatever is asked meanwhile is one more run at
 * the end, so that the last state is always told.
 */
export function latestOnly(
  act: () => Promise<void>,
  onFault: (error: unknown) => void,
): () => void {
  let running = false;
  let again = false;
  const round = async (): Promise<void> => {
    running = true;
    do {
      again = false;
      await act().catch(onFault);
    } while (again);
    running = false;
  };
  return () => {
    if (running) again = true;
    else void round();
  };
}
