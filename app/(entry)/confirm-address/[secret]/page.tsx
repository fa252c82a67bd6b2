import type { Metadata } from "next";
import { findPageLink } from "@/app/_server/page-link";
import { ConfirmAddress } from "@/components/entry/confirm-address";
import { LinkButton } from "@/components/parts/button";
import { FaultBar } from "@/components/parts/fault-bar";

/** The address is the secret: it is not handed on to other sites, nor kept by search engines. */
export const metadata: Metadata = {
  title: "New address",
  referrer: "no-referrer",
  robots: { index: false },
};

export default async function ConfirmAddressPage({
  params,
}: PageProps<"/confirm-address/[secret]">) {
  const { secret } = await params;
  const link = await findPageLink(secret, "change-address");
  if (link === null || link.new_address === null) {
    return (
      <FaultBar
        title="This link is no longer good"
        announce={false}
        actions={<LinkButton href="/account">Go to the account</LinkButton>}
      >
        It was used, or its day is over. The account page sends a new one.
      </FaultBar>
    );
  }
  return (
    <>
      <h1 className="text-entry max-lg:text-[32px]/[38px]">New address</h1>
      <ConfirmAddress secret={secret} from={link.email} to={link.new_address} />
    </>
  );
}
