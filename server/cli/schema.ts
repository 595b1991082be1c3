import { z } from "zod";
import { scenarioSchema } from "#shared/scenario/schema.ts";

/** The format as JSON Schema, repeated parts once; what only our own forms need of a number is left out. */
export const jsonSchema = (): unknown =>
  z.toJSONSchema(scenarioSchema, {
    io: "input",
    reused: "ref",
    override: ({ jsonSchema: part }) => {
      delete part.quantity;
    },
  });
