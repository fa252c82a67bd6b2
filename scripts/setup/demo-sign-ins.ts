/** The sign-ins of the demo labs, as the seed wrote them beside the data. */
import { join } from "node:path";
import { z } from "zod";
import { readText } from "../../lib/config/secrets";

const signInsSchema = z.array(
  z.object({
    lab: z.string(),
    name: z.string(),
    email: z.string(),
    password: z.string(),
    roles: z.array(z.string()),
  }),
);

export type SignIn = z.infer<typeof signInsSchema>[number];

export const signInsPath = (dataDir: string): string => join(dataDir, "demo-sign-ins.json");

/** @returns none where there is no demo */
export function readSignIns(dataDir: string): SignIn[] {
  const text = readText(signInsPath(dataDir));
  return text === null ? [] : signInsSchema.parse(JSON.parse(text));
}

/** @returns lines for the terminal; none where there is no demo */
export function describeSignIns(dataDir: string): string[] {
  const rows = readSignIns(dataDir);
  if (rows.length === 0) return [];
  const width = Math.max(...rows.map(({ email }) => email.length));
  return [
    "Demo sign-ins:",
    ...rows.map(
      ({ email, password, roles, lab }) =>
        `  ${email.padEnd(width)}  ${password}  ${roles.join(", ")} of ${lab}`,
    ),
  ];
}
