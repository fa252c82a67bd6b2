"use client";

import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";
import { ApiProblem } from "@/lib/api/client";

/** One more try where the table of errors says that trying again can help; never on a refusal. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 5_000,
        retry: (failures, error) =>
          failures < 2 && (!(error instanceof ApiProblem) || error.retryable),
      },
      mutations: { retry: false },
    },
  });
}

/** The browser's cache of answers, around the signed-in part. */
export function QueryProvider({ children }: { children: ReactNode }) {
  const [client] = useState(makeQueryClient);
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}
