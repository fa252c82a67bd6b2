/** Reads and acts on people, tokens, sessions and the lab itself, for the screens. */
import {
  infiniteQueryOptions,
  queryOptions,
  useMutation,
  useQueryClient,
} from "@tanstack/react-query";
import { useRouter } from "next/navigation";
import type { z } from "zod";
import { changePassword, endSession, listSessions, updateAccount } from "@/lib/api/account";
import { callApi } from "@/lib/api/client";
import { getLab, listTrail, updateLab } from "@/lib/api/labs";
import {
  createInvitation,
  listInvitations,
  listMembers,
  removeMember,
  setMemberRoles,
  withdrawInvitation,
} from "@/lib/api/members";
import { createToken, listTokens, revokeToken } from "@/lib/api/tokens";
import type { TrailAbout } from "@/lib/labs/trail-about";
import type { Role } from "@/lib/roles/roles";
import { queryKeys } from "./query-keys";

type BodyOf<Operation extends { body?: z.ZodType }> = z.input<NonNullable<Operation["body"]>>;

export const membersQuery = queryOptions({
  queryKey: queryKeys.members,
  queryFn: ({ signal }) => callApi(listMembers, {}, { signal }),
});

export const invitationsQuery = queryOptions({
  queryKey: queryKeys.invitations,
  queryFn: ({ signal }) => callApi(listInvitations, {}, { signal }),
});

export const tokensQuery = queryOptions({
  queryKey: queryKeys.tokens,
  queryFn: ({ signal }) => callApi(listTokens, {}, { signal }),
});

export const sessionsQuery = queryOptions({
  queryKey: queryKeys.sessions,
  queryFn: ({ signal }) => callApi(listSessions, {}, { signal }),
});

export const labQuery = queryOptions({
  queryKey: queryKeys.lab,
  queryFn: ({ signal }) => callApi(getLab, {}, { signal }),
  // A form stands on it: it is read anew when somebody saves, not while somebody types.
  staleTime: Infinity,
});

const TRAIL_PAGE = 50;

/** Newest first; each further page holds older events. */
export const trailQuery = (about: TrailAbout | null) =>
  infiniteQueryOptions({
    queryKey: queryKeys.trail(about),
    queryFn: ({ signal, pageParam }) =>
      callApi(
        listTrail,
        {
          query: {
            page_size: TRAIL_PAGE,
            ...(about === null ? {} : { about }),
            ...(pageParam === null ? {} : { before: pageParam }),
          },
        },
        { signal },
      ),
    initialPageParam: null as number | null,
    getNextPageParam: (page) => (page.more ? (page.events.at(-1)?.id ?? null) : null),
  });

/** Reads these keys anew, whether the act was done or refused: a refusal says that we saw the past. */
function useRefresh(...keys: readonly (readonly string[])[]): () => Promise<void> {
  const client = useQueryClient();
  return async () => {
    await Promise.all(keys.map((queryKey) => client.invalidateQueries({ queryKey })));
  };
}

export function useSetRoles() {
  return useMutation({
    mutationFn: (input: { accountId: string; roles: Role[] }) =>
      callApi(setMemberRoles, {
        params: { accountId: input.accountId },
        body: { roles: input.roles },
      }),
    onSettled: useRefresh(queryKeys.members),
  });
}

export function useRemoveMember() {
  return useMutation({
    mutationFn: (accountId: string) => callApi(removeMember, { params: { accountId } }),
    onSettled: useRefresh(queryKeys.members, queryKeys.tokens),
  });
}

export function useCreateInvitation() {
  return useMutation({
    mutationFn: (body: BodyOf<typeof createInvitation>) => callApi(createInvitation, { body }),
    onSettled: useRefresh(queryKeys.invitations),
  });
}

export function useWithdrawInvitation() {
  return useMutation({
    mutationFn: (invitationId: string) => callApi(withdrawInvitation, { params: { invitationId } }),
    onSettled: useRefresh(queryKeys.invitations),
  });
}

export function useCreateToken() {
  return useMutation({
    mutationFn: (body: BodyOf<typeof createToken>) => callApi(createToken, { body }),
    onSettled: useRefresh(queryKeys.tokens),
  });
}

export function useRevokeToken() {
  return useMutation({
    mutationFn: (tokenId: string) => callApi(revokeToken, { params: { tokenId } }),
    onSettled: useRefresh(queryKeys.tokens),
  });
}

/** Name, zone and rules stand in every page: the server draws its frame anew. */
export function useUpdateLab() {
  const router = useRouter();
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof updateLab>) => callApi(updateLab, { body }),
    onSuccess: (lab) => {
      client.setQueryData(queryKeys.lab, lab);
      router.refresh();
    },
  });
}

export function useUpdateAccount() {
  const router = useRouter();
  const refresh = useRefresh(queryKeys.members);
  return useMutation({
    mutationFn: (body: BodyOf<typeof updateAccount>) => callApi(updateAccount, { body }),
    onSuccess: async () => {
      router.refresh();
      await refresh();
    },
  });
}

export function useChangePassword() {
  return useMutation({
    mutationFn: (body: BodyOf<typeof changePassword>) => callApi(changePassword, { body }),
    onSettled: useRefresh(queryKeys.sessions),
  });
}

/** One or several, one after the other. */
export function useEndSessions() {
  return useMutation({
    mutationFn: async (sessionIds: readonly string[]) => {
      for (const sessionId of sessionIds) await callApi(endSession, { params: { sessionId } });
    },
    onSettled: useRefresh(queryKeys.sessions),
  });
}
