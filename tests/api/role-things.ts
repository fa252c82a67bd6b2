/** One of everything in our lab, made afresh, so that an act that takes it away finds it. */
import { randomBytes, randomUUID } from "node:crypto";
import { commentAsMaker, createPreview } from "../../db/acts/previews";
import { publishSeries } from "../../db/acts/publish";
import type { Trx } from "../../db/client";
import { inLab, type LabScope } from "../../db/in-lab";
import { createAnalysis, claimAnalysis } from "../../db/queries/analyses";
import { createInvitation } from "../../db/queries/invitations";
import { createLoudspeaker } from "../../db/queries/loudspeakers";
import { listMakerComments } from "../../db/queries/previews";
import { keepRecording } from "../../db/queries/recordings";
import { addRunRequest } from "../../db/queries/run-requests";
import { saveResult } from "../../db/queries/results";
import { createRun } from "../../db/queries/runs";
import { createSeries } from "../../db/queries/series";
import { createToken } from "../../db/queries/tokens";
import { createUpload } from "../../db/queries/uploads";
import { digestSecret } from "../../lib/account/secrets";
import { planSchema } from "../../lib/series/plan-schema";
import { makeTestMember } from "../support/lab-bench";
import { makeSampleResult } from "../support/sample-result";
import { signTestSeries } from "../support/signed-series";
import { getTestSeries } from "../support/test-series";
import type { ApiBench } from "./support";

export type Things = Awaited<ReturnType<typeof makeThings>>;

export async function makeThings(bench: ApiBench) {
  const { labId } = bench;
  const { scope } = bench.all;
  const digest = randomBytes(32).toString("hex");
  const member = await makeTestMember(bench, labId, "somebody", ["tester"]);
  const plan = planSchema.parse(getTestSeries().plan);
  const made = await inLab(bench.app, scope, async (trx) => {
    const { tuning_Hz: tuning_hz, ...rest } = getTestSeries().loudspeaker;
    const loudspeakerId = await createLoudspeaker(trx, labId, scope.accountId, {
      ...rest,
      tuning_hz,
    });
    const { id: seriesId } = await createSeries(trx, labId, scope.accountId, {
      loudspeakerId,
      plan,
    });
    await keepRecording(trx, labId, { digest, bytes: 10, media: "audio/wav" });
    const runId = await createRun(trx, labId, {
      seriesId,
      slot: null,
      role: null,
      levelDb: null,
      variant: null,
      fileName: "take.wav",
      digest,
      channel: 1,
      uploadedBy: scope.accountId,
      uploadedByToken: null,
    });
    const result = makeSampleResult();
    const analysisId = await createAnalysis(trx, labId, {
      seriesId,
      inputs: { series: {}, files: [] },
      inputsDigest: digest,
      settings: result.settings,
      engineVersion: "1.0.0",
      requestedBy: null,
    });
    await claimAnalysis(trx, labId, analysisId, 0);
    await saveResult(trx, labId, analysisId, result, new Map());
    const requestId = await addRunRequest(trx, labId, scope.accountId, {
      seriesId,
      levelDb: 91,
      kind: "short-term",
      variant: null,
      reason: "narrower",
      slot: "short-91",
    });
    const uploadId = randomBytes(16).toString("hex");
    await createUpload(trx, labId, {
      id: uploadId,
      seriesId: (await createSeries(trx, labId, scope.accountId, { loudspeakerId, plan })).id,
      slot: null,
      channel: 1,
      fileName: "upload.wav",
      bytes: 10,
      accountId: scope.accountId,
      tokenId: null,
      expiresAt: new Date(Date.now() + 60_000),
    });
    const tokenId = await createToken(trx, {
      labId,
      accountId: scope.accountId,
      name: "of somebody else",
      tokenHash: digestSecret(digest),
      prefix: "tdm_others",
      roles: ["tester"],
      expiresAt: null,
    });
    const { id: invitationId } = await createInvitation(trx, {
      labId,
      email: `${randomUUID()}@lab.test`,
      name: "",
      roles: ["tester"],
      tokenHash: digestSecret(randomUUID()),
      createdBy: scope.accountId,
    });
    const publishedId = (await createSeries(trx, labId, scope.accountId, { loudspeakerId, plan }))
      .id;
    const published = await publishThings(trx, scope, publishedId, digest);
    return {
      loudspeakerId,
      seriesId,
      runId,
      analysisId,
      requestId,
      uploadId,
      tokenId,
      invitationId,
      ...published,
    };
  });
  return { ...made, labId, plan, accountId: member.scope.accountId, sessionId: randomUUID() };
}

/** A series of its own, so that what begins before the sign-off finds the other one as it was. */
async function publishThings(
  trx: Trx,
  by: LabScope & { accountId: string },
  seriesId: string,
  inputsDigest: string,
) {
  const result = makeSampleResult();
  const analysisId = await createAnalysis(trx, by.labId, {
    seriesId,
    inputs: { series: {}, files: [] },
    inputsDigest,
    settings: result.settings,
    engineVersion: "1.0.0",
    requestedBy: null,
  });
  await claimAnalysis(trx, by.labId, analysisId, 0);
  await saveResult(trx, by.labId, analysisId, result, new Map());
  await signTestSeries(trx, by, { seriesId, analysisId, criterion: { compression_dB: 3 } });
  const words = {
    words: "",
    supplied_by: "bought by the lab",
    maker_statement: null,
    answer_to_maker: null,
    evidence_public: false,
  };
  const publicationId = await publishSeries(trx, by, seriesId, {
    words,
    slug: `things-${randomBytes(6).toString("hex")}`,
    embargoUntil: null,
    changeNote: null,
  });
  const { id: previewId } = await createPreview(trx, by, seriesId, {
    words,
    forWhom: "the maker",
    days: 14,
  });
  await commentAsMaker(trx, by.labId, previewId, {
    name: "M",
    email: "m@maker.test",
    words: "Thanks.",
  });
  const commentId = (await listMakerComments(trx, by.labId, seriesId))[0]?.id ?? "";
  return { publicationId, previewId, commentId };
}
