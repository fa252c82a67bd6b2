import { expect, it } from "vitest";
import { toDisposition } from "./disposition";

it.each([
  ["76.wav", `attachment; filename="76.wav"; filename*=UTF-8''76.wav`],
  ['a"b\r\nc.wav', `attachment; filename="a_b__c.wav"; filename*=UTF-8''a%22b%0D%0Ac.wav`],
  ["Höhe (1).wav", `attachment; filename="H_he (1).wav"; filename*=UTF-8''H%C3%B6he%20%281%29.wav`],
])("names %j", (name, header) => {
  expect(toDisposition(name)).toBe(header);
});
