"use client";

import { useMutation } from "@tanstack/react-query";
import { callApi } from "@/lib/api/client";
import { switchLab } from "@/lib/api/session";
import { useLabSession } from "../frame/lab-session";
import { Button } from "../parts/button";

/** The labs that one belongs to, with the roles there. */
export function LabChoices() {
  const { lab, labs } = useLabSession();
  const change = useMutation({
    mutationFn: (labId: string) => callApi(switchLab, { body: { lab_id: labId } }),
    // Everything on the screen belongs to the other lab: the page is loaded anew.
    onSuccess: () => window.location.assign("/series"),
  });
  if (labs.length === 0) {
    return (
      <p className="max-w-prose">
        You belong to no lab at the moment. An admin of a lab can send you an invitation; open its
        link here, with this account.
      </p>
    );
  }
  return (
    <>
      <ul className="-mt-2.5">
        {labs.map((choice) => (
          <li
            key={choice.id}
            className="flex flex-wrap items-center gap-x-5 gap-y-1 border-t border-rule py-2.5 first:border-t-0"
          >
            <span className="min-w-0 flex-[1_1_180px] font-semibold break-words">
              {choice.name}
            </span>
            <span className="flex-[1_1_200px] text-small text-ink-2">
              {choice.roles.join(", ")}
            </span>
            <span className="min-w-[80px] text-small">
              {choice.id === lab?.id ? (
                "open now"
              ) : (
                <Button
                  size="small"
                  busy={change.isPending && change.variables === choice.id}
                  onClick={() => change.mutate(choice.id)}
                >
                  Work there<span className="sr-only">, in {choice.name}</span>
                </Button>
              )}
            </span>
          </li>
        ))}
      </ul>
      {change.isError && (
        <p role="alert" className="mt-2 text-fault">
          {change.error.message}
        </p>
      )}
    </>
  );
}
