import { z } from "zod";
import { defineOperation } from "./operation";

/** For whoever watches the installation: 200 where all is well, 503 where something is not. */
export const getHealth = defineOperation({
  id: "getHealth",
  method: "GET",
  path: "/api/health",
  summary: "Whether web server, database, queue and storage answer",
  access: "anyone",
  status: 200,
  answer: z.object({
    status: z.enum(["ok", "trouble"]),
    database: z.enum(["ok", "trouble"]),
    queue: z.enum(["ok", "trouble"]),
    storage: z.enum(["ok", "trouble"]),
    engine_version: z.string(),
  }),
  errors: [],
});
