import type { ReactNode } from "react";

/** A sheet: side notes and short forms lie on it. */
export function Sheet({ children }: { children: ReactNode }) {
  return (
    <div className="border border-rule bg-sheet px-[22px] pt-[18px] pb-[22px]">{children}</div>
  );
}

interface FormSectionProps {
  title: string;
  children: ReactNode;
}

/** A part of a form: its name at the left, its fields at the right, a hairline above. */
export function FormSection({ title, children }: FormSectionProps) {
  return (
    <section className="grid gap-x-5 gap-y-3 border-t border-rule pt-4 pb-[18px] first:border-t-0 md:grid-cols-[150px_minmax(0,1fr)]">
      <h2 className="text-[17px]/6">{title}</h2>
      <div className="min-w-0">{children}</div>
    </section>
  );
}
