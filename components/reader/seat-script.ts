/** The one script of a public page: reads the two forms and draws the answers anew. */
import { USUAL_SEAT, type ReaderSeat, type SeatSource } from "@/lib/reader/seat";
import { readUnits } from "@/lib/reader/units";
import { ROOM_RADIUS_M, type RoomKind } from "@/lib/exposure/seat-level";
import { toTimeText } from "@/lib/exposure/words";
import { toDistanceText, toEnoughResult, toSeatResult } from "./seat-section";

const NEAREST_M = 0.5;
const FURTHEST_M = 20;
/** The slider is even in the logarithm. */
const toDistanceM = (share: number): number =>
  Math.round(NEAREST_M * (FURTHEST_M / NEAREST_M) ** (share / 100) * 10) / 10;

const isRoom = (text: string): text is RoomKind => text in ROOM_RADIUS_M;

function readSeat(seatForm: HTMLFormElement, enoughForm: HTMLFormElement): ReaderSeat {
  const seat = new FormData(seatForm);
  const enough = new FormData(enoughForm);
  const text = (data: FormData, name: string): string => {
    const value = data.get(name);
    return typeof value === "string" ? value : "";
  };
  const number = (data: FormData, name: string, usual: number, low: number, high: number) => {
    const written = text(data, name);
    const value = Number(written);
    return written === "" || !Number.isFinite(value) ? usual : Math.min(high, Math.max(low, value));
  };
  const room = text(seat, "room");
  return {
    distanceM: toDistanceM(number(seat, "distance", 49, 0, 100)),
    pair: text(seat, "pair") === "pair",
    room: isRoom(room) ? room : USUAL_SEAT.room,
    turnedDownDb: number(seat, "down", USUAL_SEAT.turnedDownDb, 0, 60),
    minutesPerDay: number(seat, "minutes", USUAL_SEAT.minutesPerDay, 1, 1440),
    allowance: text(seat, "allowance") === "niosh" ? "niosh" : "week",
    measuredDbA:
      text(seat, "measured") === "" ? null : number(seat, "measured", USUAL_SEAT.usualDbA, 30, 140),
    usualDbA: number(enough, "usual", USUAL_SEAT.usualDbA, 40, 120),
    units: readUnits(seatForm.dataset["units"]),
    crestDb: number(enough, "crest", USUAL_SEAT.crestDb, 3, 30),
  };
}

function put(id: string, markup: string): void {
  const element = document.getElementById(id);
  if (element !== null && element.innerHTML !== markup) element.innerHTML = markup;
}

/** Shows the forms and answers every change. */
export function startReader(): void {
  const data = document.getElementById("seat-source");
  const seatForm = document.getElementById("seat-form");
  const enoughForm = document.getElementById("enough-form");
  if (
    data === null ||
    !(seatForm instanceof HTMLFormElement) ||
    !(enoughForm instanceof HTMLFormElement)
  ) {
    return;
  }
  // Written by the page that carries this script.
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion
  const source = JSON.parse(data.textContent ?? "null") as SeatSource;
  const answer = (): void => {
    const seat = readSeat(seatForm, enoughForm);
    put("distance-out", toDistanceText(seat));
    put("minutes-out", toTimeText(seat.minutesPerDay * 60));
    put("seat-result", toSeatResult(source, seat).text);
    put("enough-result", toEnoughResult(source, seat).text);
  };
  for (const form of [seatForm, enoughForm]) {
    form.hidden = false;
    form.addEventListener("input", answer);
    form.addEventListener("submit", (event) => event.preventDefault());
  }
  answer();
}

startReader();
