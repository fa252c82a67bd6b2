"use client";

import { Button } from "../parts/button";

export function PrintButton() {
  return (
    <Button tone="main" onClick={() => window.print()}>
      Print
    </Button>
  );
}
