/** Reads comparisons of series, for the screens. */
import { keepPreviousData, queryOptions } from "@tanstack/react-query";
import type { z } from "zod";
import { callApi } from "@/lib/api/client";
import { compareSeries, type compareQuerySchema } from "@/lib/api/compare";
import { queryKeys } from "./query-keys";

/** The comparison before stands until the next one is here. */
export const comparisonQuery = (query: z.input<typeof compareQuerySchema>) =>
  queryOptions({
    queryKey: queryKeys.comparison(query),
    queryFn: ({ signal }) => callApi(compareSeries, { query }, { signal }),
    placeholderData: keepPreviousData,
  });
