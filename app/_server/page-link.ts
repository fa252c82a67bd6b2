/** The one-time link behind a page's address. */
import type { LinkPurpose } from "../../db/queries/account-links";
import type { OpenAccountLink } from "../../lib/api/account-links";
import { AppError } from "../../lib/errors/app-error";
import { getOpenLink } from "./account-links";
import { getDatabase } from "./database";

/** @returns null for a link that is used, expired, or meant for something else. */
export async function findPageLink(
  secret: string,
  purpose: LinkPurpose,
): Promise<OpenAccountLink | null> {
  try {
    const link = await getOpenLink(getDatabase(), secret);
    return link.purpose === purpose ? link : null;
  } catch (error) {
    if (error instanceof AppError && error.code === "link.invalid") return null;
    throw error;
  }
}
