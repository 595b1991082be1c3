import { QueryClientProvider } from "@tanstack/react-query";
import { useState } from "react";
import { RouterProvider } from "react-router-dom";
import { Patterns } from "#src/components/ui/patterns.tsx";
import { createQueryClient } from "./query-client.ts";
import { createRouter } from "./router.tsx";

export function App() {
  const [client] = useState(createQueryClient);
  const [router] = useState(createRouter);
  return (
    <QueryClientProvider client={client}>
      <Patterns />
      <RouterProvider router={router} />
    </QueryClientProvider>
  );
}
