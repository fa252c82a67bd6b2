"use client";

import { useEffect } from "react";

const QUESTION = "This page has changes that are not saved. Leave without them?";

/** Asks before the page is left while something is not saved: closing, reloading, following a link. */
export function useUnsavedGuard(unsaved: boolean): void {
  useEffect(() => {
    if (!unsaved) return undefined;
    const onUnload = (event: BeforeUnloadEvent): void => event.preventDefault();
    const onClick = (event: MouseEvent): void => {
      const link = event.target instanceof Element ? event.target.closest("a[href]") : null;
      if (!(link instanceof HTMLAnchorElement)) return;
      const elsewhere = link.target !== "" && link.target !== "_self";
      const newTab = event.ctrlKey || event.metaKey || event.shiftKey || event.button !== 0;
      if (elsewhere || newTab || link.hasAttribute("download")) return;
      if (link.getAttribute("href")?.startsWith("#")) return;
      // oxlint-disable-next-line no-alert -- the same plain question as the browser's own on closing
      if (!window.confirm(QUESTION)) {
        event.preventDefault();
        event.stopPropagation();
      }
    };
    window.addEventListener("beforeunload", onUnload);
    document.addEventListener("click", onClick, true);
    return () => {
      window.removeEventListener("beforeunload", onUnload);
      document.removeEventListener("click", onClick, true);
    };
  }, [unsaved]);
}
