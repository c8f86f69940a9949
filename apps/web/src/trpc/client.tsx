"use client";

import type { AppRouter } from "@weighhouse/api/router";
import { QueryClient, QueryClientProvider } from "@tanstack/react-query";
import { createTRPCClient, httpBatchLink, httpSubscriptionLink, splitLink } from "@trpc/client";
import { createTRPCContext } from "@trpc/tanstack-react-query";
import type { ReactNode } from "react";
import { useState } from "react";
import superjson from "superjson";

const { TRPCProvider, useTRPCClient } = createTRPCContext<AppRouter>();
export { useTRPCClient };

/** Gives the pages below it the API's client and its cache. */
export function ApiProvider({ children }: { children: ReactNode }) {
  const [queryClient] = useState(
    () =>
      new QueryClient({
        // A form's answer about bad input is final: only reading is worth another try.
        defaultOptions: { queries: { staleTime: 5_000, retry: 1 }, mutations: { retry: false } },
      }),
  );
  const [client] = useState(createClient);
  return (
    <QueryClientProvider client={queryClient}>
      <TRPCProvider trpcClient={client} queryClient={queryClient}>
        {children}
      </TRPCProvider>
    </QueryClientProvider>
  );
}

function createClient() {
  const url = "/api/trpc";
  return createTRPCClient<AppRouter>({
    links: [
      splitLink({
        condition: (operation) => operation.type === "subscription",
        true: httpSubscriptionLink({ url, transformer: superjson }),
        false: httpBatchLink({ url, transformer: superjson }),
      }),
    ],
  });
}
