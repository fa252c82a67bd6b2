import type { Metadata } from "next";
import { getPageCaller } from "@/app/_server/page-caller";
import { LoudspeakerPage } from "@/components/loudspeakers/loudspeaker-page";
import { may } from "@/lib/roles/roles";

export const metadata: Metadata = { title: "Loudspeaker" };

export default async function OneLoudspeakerPage({
  params,
}: PageProps<"/loudspeakers/[loudspeakerId]">) {
  const [{ loudspeakerId }, caller] = await Promise.all([params, getPageCaller()]);
  return (
    <LoudspeakerPage loudspeakerId={loudspeakerId} mayCapture={may(caller.roles, "capture")} />
  );
}
