import type { TestProject } from "vitest/node";
import { ensureClient } from "../../scripts/lib/client.mjs";
import { startStack } from "./stack.ts";

declare module "vitest" {
  export interface ProvidedContext {
    address: string;
    databaseUrl: string;
  }
}

export default async function setup(project: TestProject) {
  await ensureClient();
  const stack = await startStack();
  project.provide("address", stack.address);
  project.provide("databaseUrl", stack.databaseUrl);
  return () => stack.stop();
}
