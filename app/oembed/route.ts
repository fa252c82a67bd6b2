import { answerOembed } from "@/app/_server/reader/answer-oembed";

/** oEmbed 1.0: `?url=` of a published test, `&format=json` or `xml`, `&maxwidth=`, `&maxheight=`. */
export const GET = (request: Request): Promise<Response> => answerOembed(request);
