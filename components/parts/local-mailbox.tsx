interface LocalMailboxProps {
  /** null where mail goes out for good: then nothing is said. */
  url: string | null;
}

/** Beside words that a mail is on its way, where it ends on this machine. */
export function LocalMailbox({ url }: LocalMailboxProps) {
  if (url === null) return null;
  return (
    <>
      {" "}
      Mail of this installation is read in its{" "}
      <a href={url} target="_blank" rel="noreferrer">
        local mailbox
      </a>
      .
    </>
  );
}
