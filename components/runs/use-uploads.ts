"use client";

import { useQueryClient } from "@tanstack/react-query";
import { useEffect, useState, useSyncExternalStore } from "react";
import { queryKeys } from "../queries/query-keys";
import { makeTusTransfer } from "./tus-transfer";
import { createUploadController, type UploadController } from "./upload-controller";
import type { UploadItem } from "./upload-item";

const NONE: readonly UploadItem[] = [];

/** The files on their way to a series; asks before the page is closed while some are. */
export function useUploads(seriesId: string): {
  uploads: readonly UploadItem[];
  controller: UploadController;
} {
  const client = useQueryClient();
  const [controller] = useState(() =>
    createUploadController({
      startTransfer: makeTusTransfer(seriesId),
      onReceived: () => client.invalidateQueries({ queryKey: queryKeys.series(seriesId) }),
    }),
  );
  const uploads = useSyncExternalStore(controller.subscribe, controller.getItems, () => NONE);
  const going = uploads.some((upload) => upload.state !== "done" && upload.state !== "failed");
  useEffect(() => {
    if (!going) return undefined;
    const onUnload = (event: BeforeUnloadEvent): void => event.preventDefault();
    window.addEventListener("beforeunload", onUnload);
    return () => window.removeEventListener("beforeunload", onUnload);
  }, [going]);
  return { uploads, controller };
}
