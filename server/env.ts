import { z } from "zod";

const onOff = z.enum(["on", "off"]).transform((value) => value === "on");

const envSchema = z.object({
  DATABASE_URL: z.string().regex(/^postgres(ql)?:\/\//, "an address such as postgres://user@127.0.0.1:5432/holdfast"),
  PORT: z.coerce.number().int().min(1).max(65_535).default(4310),
  /** Lay out the demo team on the first start, and show its sign-ins on the sign-in page. */
  HOLDFAST_DEMO: onOff.default(true),
  /** Key of the session cookies; left out, one is made and kept in the database. */
  HOLDFAST_SESSION_SECRET: z.string().min(32, "at least 32 characters").optional(),
  LOG_LEVEL: z.enum(["fatal", "error", "warn", "info", "debug", "trace", "silent"]).default("warn"),
});
export type Env = z.infer<typeof envSchema>;

/** The environment as it has to be, or one message with every variable that is not. */
export function readEnv(variables: Record<string, string | undefined>): Env {
  const parsed = envSchema.safeParse(variables);
  if (parsed.success) return parsed.data;
  const lines = parsed.error.issues.map(({ path, message }) => {
    const name = String(path[0]);
    return `  ${name} is ${variables[name] === undefined ? "missing" : JSON.stringify(variables[name])}: ${message}`;
  });
  throw new Error(`Holdfast cannot start with this environment.\n${lines.join("\n")}`);
}
