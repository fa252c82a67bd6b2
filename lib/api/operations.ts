/** Every operation of the API, in the order of the document. */
import { accountOperations } from "./account";
import { accountLinkOperations } from "./account-links";
import { analysisOperations } from "./analyses";
import { compareOperations } from "./compare";
import { getHealth } from "./health";
import { evidenceOperations, keepingOperations, seriesFolderOperations } from "./keeping";
import { labOperations } from "./labs";
import { loudspeakerOperations } from "./loudspeakers";
import { memberOperations } from "./members";
import { microphoneOperations } from "./microphones";
import { noticeOperations } from "./notices";
import type { Operation } from "./operation";
import { reviewOperations } from "./review";
import { publicationOperations } from "./publications";
import { runOperations } from "./runs";
import { seriesOperations } from "./series";
import { sessionOperations } from "./session";
import { tokenOperations } from "./tokens";

export const OPERATION_GROUPS: Readonly<Record<string, readonly Operation[]>> = {
  Loudspeakers: loudspeakerOperations,
  Series: [...seriesOperations, ...microphoneOperations, ...seriesFolderOperations],
  Recordings: runOperations,
  Analyses: analysisOperations,
  Review: reviewOperations,
  Compare: compareOperations,
  Publications: [...publicationOperations, ...evidenceOperations],
  Account: [
    ...sessionOperations,
    ...accountOperations,
    ...noticeOperations,
    ...accountLinkOperations,
  ],
  Members: memberOperations,
  Tokens: tokenOperations,
  Lab: [...labOperations, ...keepingOperations],
  Service: [getHealth],
};

export const OPERATIONS: readonly Operation[] = Object.values(OPERATION_GROUPS).flat();
