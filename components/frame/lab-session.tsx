"use client";

import { createContext, use, type ReactNode } from "react";
import type { SessionView } from "@/lib/api/session";
import { may, type Capability } from "@/lib/roles/roles";
import { NO_LAB_ZONE } from "@/lib/time/time-words";

const LabSessionContext = createContext<SessionView | null>(null);

/** Makes the signed-in person, the lab and the roles known to every part of the page. */
export function LabSessionProvider({
  session,
  children,
}: {
  session: SessionView;
  children: ReactNode;
}) {
  return <LabSessionContext value={session}>{children}</LabSessionContext>;
}

/** Who is signed in, in which lab, in which time zone. Only inside the signed-in part. */
export function useLabSession(): SessionView {
  const session = use(LabSessionContext);
  if (session === null) throw new Error("useLabSession needs a LabSessionProvider above it");
  return session;
}

/** Time zone of the lab: every time on the screen is told in it. */
export const useLabZone = (): string => useLabSession().lab?.time_zone ?? NO_LAB_ZONE;

/** Whether the present roles allow it; the server asks again. */
export const useMay = (capability: Capability): boolean => may(useLabSession().roles, capability);
