/** The built product over a database of its own, a lab in it, and calls with a token. */
import { setTimeout as sleep } from "node:timers/promises";
import Ajv2020, { type ValidateFunction } from "ajv/dist/2020";
import addFormats from "ajv-formats";
import type { z } from "zod";
import { problemSchema, type Problem } from "../../lib/api/common";
import { listErrors, toAnswerSchema } from "../../lib/api/openapi";
import { ApiProblem, callApi, type CallInput } from "../../lib/api/client";
import { createLoudspeaker } from "../../lib/api/loudspeakers";
import type { Operation } from "../../lib/api/operation";
import { createSeries, getSeries, type SeriesView } from "../../lib/api/series";
import type { PlanInput } from "../../lib/series/plan-schema";
import { createTestDatabase } from "../support/database";
import { makeTestLab, openLabBench, type LabBench, type TestMember } from "../support/lab-bench";
import { startTestProduct, type TestProduct } from "../support/product";
import { getTestSeries } from "../support/test-series";

export interface ApiBench extends LabBench {
  product: TestProduct;
  labId: string;
  /** Holds every role. */
  all: TestMember;
  stop: () => Promise<void>;
}

export async function openApiBench(env: Record<string, string> = {}): Promise<ApiBench> {
  const database = await createTestDatabase();
  const bench = openLabBench(database);
  const { labId, all } = await makeTestLab(bench, "own");
  const product = await startTestProduct(database, env);
  return {
    ...bench,
    product,
    labId,
    all,
    stop: async () => {
      await product.stop();
      await bench.close();
      await database.drop();
    },
  };
}

/** Every JSON answer is held against the schema of the published document. */
const validators = new Map<string, ValidateFunction>();
const ajv = addFormats(new Ajv2020({ strict: false, allErrors: true }));

/** Status, kind and contents of an answer are those that the published document names. */
export async function validateResponse(operation: Operation, response: Response): Promise<void> {
  const kind = response.headers.get("content-type");
  if (response.ok) {
    const ranged = operation.ranged === true && response.status === 206;
    if (response.status !== operation.status && !ranged) {
      throw new Error(`${operation.id} answers ${response.status}, not ${operation.status}`);
    }
    if (kind === "application/json") validateAnswer(operation, await response.clone().json());
    return;
  }
  if (kind !== "application/problem+json") return;
  const { code, status } = problemSchema.parse(await response.clone().json());
  if (status !== response.status || !listErrors(operation).some((known) => known === code)) {
    throw new Error(`${operation.id} answers ${status} ${code}, which its document does not name`);
  }
}

function validateAnswer(operation: Operation, json: unknown): void {
  const schema = toAnswerSchema(operation);
  if (schema === null) return;
  const validate = validators.get(operation.id) ?? ajv.compile(schema);
  validators.set(operation.id, validate);
  if (!validate(json)) {
    throw new Error(
      `${operation.id} answers what its document does not say: ${ajv.errorsText(validate.errors)}`,
    );
  }
}

/** Calls as the member with every role, unless another token is named. */
export async function call<
  P extends z.ZodType,
  Q extends z.ZodType,
  B extends z.ZodType,
  A extends z.ZodType,
>(
  bench: ApiBench,
  operation: Operation<P, Q, B, A>,
  input: CallInput<z.input<P>, z.input<Q>, z.input<B>> = {},
  token: string = bench.all.token,
): Promise<z.output<A>> {
  const faults: unknown[] = [];
  try {
    return await callApi(operation, input, {
      baseUrl: bench.product.url,
      token,
      fetch: async (address, init) => {
        const response = await fetch(address, init);
        // The client would take a fault thrown here for a lost connection.
        await validateResponse(operation, response).catch((fault: unknown) => faults.push(fault));
        return response;
      },
    });
  } finally {
    // oxlint-disable-next-line no-unsafe-finally
    if (faults.length > 0) throw faults[0];
  }
}

/** The problem that a call ends with. */
export async function problemOf(answer: Promise<unknown>): Promise<Problem> {
  const error = await answer.then(
    () => null,
    (thrown: unknown) => thrown,
  );
  if (error instanceof ApiProblem) return error.problem;
  throw new Error("the call did not end with a problem", { cause: error });
}

/** A loudspeaker with a planned series, ready for the files of getTestSeries. */
export async function planTestSeries(
  bench: ApiBench,
  plan: PlanInput = getTestSeries().plan,
): Promise<SeriesView> {
  const loudspeaker = await call(bench, createLoudspeaker, { body: getTestSeries().loudspeaker });
  return call(bench, createSeries, { body: { loudspeaker_id: loudspeaker.id, plan } });
}

export const target = (bench: ApiBench) => ({
  url: bench.product.url,
  token: bench.all.token,
});

/** Asks again until the answer is as wanted; the product's output is shown where it never is. */
export async function until<T>(
  bench: ApiBench,
  ask: () => Promise<T>,
  wanted: (answer: T) => boolean,
  withinMs = 45_000,
): Promise<T> {
  const end = Date.now() + withinMs;
  for (;;) {
    const answer = await ask();
    if (wanted(answer)) return answer;
    if (Date.now() > end) {
      throw new Error(
        `never came: ${JSON.stringify(answer).slice(0, 2000)}\n${bench.product.output().slice(-4000)}`,
      );
    }
    await sleep(50);
  }
}

export const seriesInState = (
  bench: ApiBench,
  seriesId: string,
  ...states: SeriesView["state"][]
) =>
  until(
    bench,
    () => call(bench, getSeries, { params: { seriesId } }),
    (series) => states.includes(series.state),
  );
