"use client";

import { useMutation } from "@tanstack/react-query";
import { signOut } from "next-auth/react";
import { callApi } from "@/lib/api/client";
import { switchLab } from "@/lib/api/session";
import { AccountMenu } from "./account-menu";
import { useLabSession } from "./lab-session";

/** The account menu with its acts: another lab, and out. Both load the page anew, so that nothing of before stays. */
export function AccountControl() {
  const { account, lab, labs, roles } = useLabSession();
  const change = useMutation({
    mutationFn: (labId: string) => callApi(switchLab, { body: { lab_id: labId } }),
    onSuccess: () => window.location.assign("/series"),
    onError: () => window.location.reload(),
  });
  return (
    <AccountMenu
      name={account.name}
      roles={roles}
      lab={lab ?? { id: "", name: "no lab" }}
      labs={labs}
      onSwitchLab={(labId) => change.mutate(labId)}
      onSignOut={() => void signOut({ callbackUrl: "/sign-in" })}
    />
  );
}
