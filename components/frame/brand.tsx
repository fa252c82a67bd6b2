import { COLOURS, levelRamp, toCss } from "@/lib/charts/tokens";

/** The mark: a high-water line over a column of three waters with an onset notch. */
export function BrandMark({ size = 26 }: { size?: number }) {
  const [, low, middle, high] = levelRamp(4);
  return (
    <svg width={size} height={size} viewBox="0 0 32 32" aria-hidden="true" className="flex-none">
      <path fill={toCss(COLOURS.ink)} d="M2 4h28v5H2z" />
      {high && <path fill={toCss(high.fill)} d="M9 9h14v6h-8.5L9 11.4z" />}
      {middle && <path fill={toCss(middle.fill)} d="M14.5 15H23v6H9v-2.4z" />}
      {low && <path fill={toCss(low.fill)} d="M9 21h14v7H9z" />}
    </svg>
  );
}

/** Mark and name, as they stand in the header and over the sign-in form. */
export function Brand({ size = 26 }: { size?: number }) {
  return (
    <span className="inline-flex items-center gap-[9px] text-[18px] font-[720] tracking-[-0.01em]">
      <BrandMark size={size} />
      Tidemark
    </span>
  );
}
