import { z } from "zod";
import { COMPARED_KINDS, comparisonSchema, MOST_COMPARED } from "../compare/comparison-schema";
import { idSchema } from "./common";
import { defineOperation } from "./operation";

const UUID = "[0-9a-fA-F]{8}(?:-[0-9a-fA-F]{4}){3}-[0-9a-fA-F]{12}";
/** "10", "0.5" or "off"; what is not offered falls back to the usual. */
const partSchema = z.string().max(12).optional();

export const compareQuerySchema = z.strictObject({
  /** Ids of one to four series, parted by commas; the first is the reference. */
  series: z
    .string()
    .regex(
      new RegExp(`^${UUID}(?:,${UUID}){0,${MOST_COMPARED - 1}}$`),
      `Name one to ${MOST_COMPARED} series by their ids, parted by commas.`,
    ),
  thd: partSchema,
  compression: partSchema,
  runs: z.enum(COMPARED_KINDS).default("short-term"),
});

export const compareAnswerSchema = comparisonSchema.extend({
  /** What may be chosen, given the analyses of these series. */
  offered: z.object({
    thd_percents: z.array(z.number()),
    compressions_dB: z.array(z.number()),
    runs: z.array(z.enum(COMPARED_KINDS)),
  }),
  /** Every series asked for, in order, whether it can be compared or not. */
  asked: z.array(z.object({ id: idSchema, maker: z.string(), model: z.string() })),
});
export type CompareAnswer = z.infer<typeof compareAnswerSchema>;

export const compareSeries = defineOperation({
  id: "compareSeries",
  method: "GET",
  path: "/api/v1/compare",
  summary: "Output limits of up to four series side by side, with the differences to the first",
  access: "see",
  query: compareQuerySchema,
  status: 200,
  answer: compareAnswerSchema,
  errors: ["request.invalid", "not-found"],
});

export const compareOperations = [compareSeries] as const;
