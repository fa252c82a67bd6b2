/** What the account page asks and does about mail: apart from people.ts, which every page loads. */
import { queryOptions, useMutation, useQueryClient } from "@tanstack/react-query";
import { requestAddressChange } from "@/lib/api/account-links";
import { callApi } from "@/lib/api/client";
import { chooseNotice, getNoticeChoices } from "@/lib/api/notices";
import type { NoticeKind } from "@/lib/mail/notices";
import { queryKeys } from "./query-keys";

export const noticesQuery = queryOptions({
  queryKey: queryKeys.notices,
  queryFn: ({ signal }) => callApi(getNoticeChoices, {}, { signal }),
});

export function useChooseNotice() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: { kind: NoticeKind; wanted: boolean }) => callApi(chooseNotice, { body }),
    onSuccess: (choices) => client.setQueryData(queryKeys.notices, choices),
  });
}

export function useChangeAddress() {
  return useMutation({
    mutationFn: (body: { email: string; password: string }) =>
      callApi(requestAddressChange, { body }),
  });
}
