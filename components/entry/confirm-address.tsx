"use client";

import { useMutation } from "@tanstack/react-query";
import { confirmAddress } from "@/lib/api/account-links";
import { callApi } from "@/lib/api/client";
import { Button, LinkButton } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import { QueryProvider } from "../queries/query-provider";

interface ConfirmAddressProps {
  secret: string;
  /** The address that is signed in with now. */
  from: string;
  to: string;
}

/** A press, not a visit, confirms: mail programs look at links by themselves. */
export function ConfirmAddress(props: ConfirmAddressProps) {
  return (
    <QueryProvider>
      <div aria-live="polite">
        <Act {...props} />
      </div>
    </QueryProvider>
  );
}

function Act({ secret, from, to }: ConfirmAddressProps) {
  const confirm = useMutation({
    mutationFn: () => callApi(confirmAddress, { body: { secret } }),
  });
  if (confirm.isSuccess) {
    return (
      <div className="mt-1.5">
        <p className="mb-6.5 text-[16px]/6">
          From now on you sign in with <b className="break-all">{confirm.data.email}</b>.
        </p>
        <LinkButton href="/account">Go to the account</LinkButton>
      </div>
    );
  }
  return (
    <>
      <p className="mt-1.5 mb-6.5 text-[16px]/6 text-ink-2">
        You sign in with <b className="break-all text-ink">{to}</b> instead of{" "}
        <span className="break-all">{from}</span> from then on.
      </p>
      {confirm.error !== null && (
        <FaultBar className="mb-4" title="The address was not changed">
          {confirm.error.message}
        </FaultBar>
      )}
      <Button
        tone="main"
        size="form"
        className="w-full"
        busy={confirm.isPending}
        onClick={() => confirm.mutate()}
      >
        Confirm this address
      </Button>
    </>
  );
}
