import type { Figure } from "@/lib/charts/figure";
import { MEASURING_PICTURES } from "@/lib/charts/measuring-pictures";
import { FigureSvg } from "../parts/figure-svg";

const STEPS: { picture: Figure; title: string; text: string }[] = [
  {
    picture: MEASURING_PICTURES.tone,
    title: "One tone at a time",
    text: "The sweep rises from 20 Hz to 20 kHz in 11 seconds and spends about 0.4 s in each third-octave band. Music is many tones at once, so it differs.",
  },
  {
    picture: MEASURING_PICTURES.steps,
    title: "Louder by exact steps",
    text: "The files hold the steps; volume and input gain stay as they are. A level is played only when the one below has passed its checks.",
  },
  {
    picture: MEASURING_PICTURES.short,
    title: "What falls short",
    text: "Compression is the expected level less the measured one. Distortion is what comes out at other frequencies. The limit is whichever comes first.",
  },
  {
    picture: MEASURING_PICTURES.unknown,
    title: "What is not known",
    text: "A limit that was not reached is “at least”. What lies in the noise is hatched and never counted. Nothing is extended beyond what was played.",
  },
];

/** The method in four pictures; each stands beside its words and is hidden from readers. */
export function MeasuringSteps() {
  return (
    <div className="mt-10 grid gap-8 sm:grid-cols-2 lg:grid-cols-4">
      {STEPS.map(({ picture, title, text }) => (
        <section key={title} className="min-w-0">
          <FigureSvg figure={picture} />
          <h2 className="mt-3 mb-1">{title}</h2>
          <p className="text-[16px]/6 text-ink-2">{text}</p>
        </section>
      ))}
    </div>
  );
}
