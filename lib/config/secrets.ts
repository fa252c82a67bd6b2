/**
 * The secrets of one installation: the key that signs sessions and one password per database role.
 * They are made once, at the first start, and kept beside the data, readable by their owner alone.
 */
import { randomBytes } from "node:crypto";
import { chmodSync, linkSync, mkdirSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { z } from "zod";
import { AppError } from "../errors/app-error";
import { hasErrorCode } from "../errors/has-error-code";

const secretSchema = z.string().min(24);

/** Names of the database roles, as they stand in secrets and in connection strings. */
export const DATABASE_ROLES = ["superuser", "owner", "migrator", "app", "queue"] as const;
export type DatabaseRole = (typeof DATABASE_ROLES)[number];

const secretsSchema = z.strictObject({
  session: secretSchema,
  database: z.strictObject({
    superuser: secretSchema,
    owner: secretSchema,
    migrator: secretSchema,
    app: secretSchema,
    queue: secretSchema,
  }),
});
export type Secrets = z.infer<typeof secretsSchema>;

/** Where the secrets of a data folder lie. */
export const secretsPath = (dataDir: string): string => join(dataDir, "secrets.json");

/**
 * @param text content of secrets.json
 * @param path named in the message
 * @throws AppError "config.invalid" where the text is not what was written at the first start
 */
export function parseSecrets(text: string, path: string): Secrets {
  const problem = (why: string, cause?: unknown): AppError =>
    new AppError(
      "config.invalid",
      `${path} cannot be used: ${why}. Put the file back from a copy, or delete it to have new ` +
        "secrets made at the next start; everyone then signs in again.",
      { cause },
    );
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch (error) {
    throw problem("it is not JSON", error);
  }
  const parsed = secretsSchema.safeParse(json);
  if (!parsed.success) {
    const issue = parsed.error.issues[0];
    throw problem(`${issue?.path.join(".") || "the file"}: ${issue?.message ?? "does not fit"}`);
  }
  return parsed.data;
}

/** Fresh secrets, 256 bits each. */
export function createSecrets(): Secrets {
  const secret = (): string => randomBytes(32).toString("base64url");
  return {
    session: secret(),
    database: {
      superuser: secret(),
      owner: secret(),
      migrator: secret(),
      app: secret(),
      queue: secret(),
    },
  };
}

/**
 * Reads the secrets of a data folder; makes folder (0711: the database's own user must pass
 * through) and file (0600) where they are missing. Two starts at once end up with the same file.
 *
 * @returns the secrets, and whether this call made them
 */
export function ensureSecrets(dataDir: string): { secrets: Secrets; made: boolean } {
  const path = secretsPath(dataDir);
  mkdirSync(dataDir, { recursive: true, mode: 0o711 });
  const existing = readText(path);
  if (existing !== null) {
    chmodSync(path, 0o600);
    return { secrets: parseSecrets(existing, path), made: false };
  }
  const draft = `${path}.${process.pid}`;
  writeFileSync(draft, `${JSON.stringify(createSecrets(), null, 2)}\n`, { mode: 0o600 });
  try {
    linkSync(draft, path);
  } catch (error) {
    if (!hasErrorCode(error, "EEXIST")) throw error;
  } finally {
    rmSync(draft, { force: true });
  }
  return { secrets: parseSecrets(readFileSync(path, "utf8"), path), made: true };
}

/** The text of a file, or null where there is none. */
export function readText(path: string): string | null {
  try {
    return readFileSync(path, "utf8");
  } catch (error) {
    if (hasErrorCode(error, "ENOENT")) return null;
    throw error;
  }
}
