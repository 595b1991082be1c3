export function startServer(
  args: string[],
  env: Record<string, string>,
): Promise<{ address: string; ended: Promise<unknown>; stop(): Promise<void> }>;
