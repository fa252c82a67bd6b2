import type { Figure } from "@/lib/charts/figure";
import { MEASURING_PICTURES } from "@/lib/charts/measuring-pictures";
import { toSvg } from "@/lib/charts/svg-text";
import { html, type Html } from "@/lib/html/html";

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
export const toMeasuringSteps = (): Html =>
  html`<div class="steps">
    ${STEPS.map(
      ({ picture, title, text }, at) =>
        html`<section>
          ${toSvg(picture, { id: `step${at}` })}
          <h2>${title}</h2>
          <p>${text}</p>
        </section>`,
    )}
  </div>`;
