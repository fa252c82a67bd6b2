/** As much of a queue as asking for a job needs. */
export interface JobQueue<Payload> {
  /** A job of the same id that waits or runs already is not made twice. */
  add(name: string, payload: Payload, options: { jobId: string }): Promise<unknown>;
}
