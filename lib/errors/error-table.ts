/**
 * Every error code, once: its HTTP status, its title and whether trying again can help.
 * Codes are stable: scripts branch on them. Add a row before throwing a new code.
 */
interface ErrorRow {
  status: number;
  title: string;
  retryable: boolean;
}

const final = (status: number, title: string): ErrorRow => ({ status, title, retryable: false });
const passing = (status: number, title: string): ErrorRow => ({ status, title, retryable: true });

export const ERROR_TABLE = {
  // Reading files
  "audio.not-audio": final(422, "Not an audio file"),
  "audio.empty": final(422, "The file holds no samples"),
  "audio.truncated": final(422, "The file ends before its header says"),
  "audio.length-lies": final(422, "The header contradicts the file"),
  "audio.format-unsupported": final(422, "This kind of audio is not read"),
  "audio.channel-missing": final(422, "The file has no such channel"),
  "audio.too-large": final(413, "The file is too large"),
  "table.not-readable": final(422, "Not a table of frequency and level"),
  "table.column-missing": final(422, "A column is missing"),
  "table.too-large": final(413, "The table is too large"),
  "microphone.not-readable": final(422, "Not a microphone file"),
  // The series
  "series.not-json": final(422, "series.json is not JSON"),
  "series.invalid": final(422, "series.json does not fit its schema"),
  "series.unknown-key": final(422, "series.json holds an unknown key"),
  "series.file-name": final(422, "A file name leaves the folder"),
  "series.file-missing": final(422, "A named file is missing"),
  "series.not-plannable": final(422, "A series here cannot hold this folder"),
  "series.too-few-runs": final(422, "Too few runs to analyse"),
  "series.reference-missing": final(422, "There is no short-term run"),
  "calibration.missing": final(422, "There is no calibration"),
  "calibration.not-a-tone": final(422, "The calibrator recording holds no tone"),
  "stimulus.invalid": final(422, "The stimulus cannot be used"),
  "stimulus.rate": final(422, "The sample rate does not fit"),
  "run.no-sweep": final(422, "No sweep was found"),
  "run.silent": final(422, "The recording is silent"),
  "run.too-short": final(422, "The recording is too short"),
  "analysis.nothing-valid": final(422, "No band could be measured"),
  "analysis.argument": final(500, "The engine was called wrongly"),
  "analysis.cancelled": final(409, "The analysis was cancelled"),
  // Requests
  "request.invalid": final(400, "The request does not fit its schema"),
  "request.origin": final(403, "The request came from another site"),
  "request.media-type": final(415, "This content type is not taken"),
  "request.too-large": final(413, "The request is too large"),
  "auth.required": final(401, "Sign in first"),
  "auth.wrong": final(401, "Address or password is wrong"),
  "auth.rate-limited": passing(429, "Too many attempts"),
  "auth.forbidden": final(403, "Your roles do not allow this"),
  "auth.session-needed": final(403, "A token cannot do this"),
  "auth.token-invalid": final(401, "The token is not valid"),
  "invitation.invalid": final(410, "The invitation is used or expired"),
  "link.invalid": final(410, "The link is used or expired"),
  "password.weak": final(422, "The password is too short"),
  "not-found": final(404, "Not found"),
  "conflict.changed": final(409, "It was changed meanwhile"),
  "conflict.state": final(409, "The state does not allow this"),
  "conflict.exists": final(409, "It exists already"),
  "member.last-admin": final(409, "A lab keeps at least one admin"),
  "plan.invalid": final(422, "The plan cannot be carried out"),
  "plan.locked": final(409, "The plan is fixed once a recording is in"),
  "run.locked": final(409, "This level is not open yet"),
  "recording.removed": final(410, "The recording was removed"),
  "run.reason-missing": final(422, "A reason is needed"),
  "upload.not-found": final(404, "There is no such upload"),
  "upload.expired": final(410, "The upload expired"),
  "upload.offset": final(409, "The upload stands at another offset"),
  "upload.too-large": final(413, "The file is too large"),
  "storage.full": passing(507, "The disk is full"),
  "storage.missing": passing(500, "A stored recording is missing"),
  "photo.not-image": final(422, "Not a picture that can be shown"),
  // Ours
  "config.invalid": final(500, "A setting is wrong"),
  "queue.unavailable": passing(503, "The queue cannot be reached"),
  "database.unavailable": passing(503, "The database cannot be reached"),
  "database.migration": final(500, "The database could not be brought up to date"),
  internal: passing(500, "Something went wrong on our side"),
} as const satisfies Record<string, ErrorRow>;

export type ErrorCode = keyof typeof ERROR_TABLE;
