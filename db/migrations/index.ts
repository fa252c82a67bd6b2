/** Every migration in its order, as a list that bundles. Append only. */
import type { Migration } from "kysely";
import * as people from "./20261201t0900-people";
import * as capture from "./20261201t0901-capture";
import * as analyses from "./20261201t0902-analyses";
import * as audit from "./20261201t0903-audit";
import * as lookups from "./20261201t0904-lookups";
import * as captureWalls from "./20261201t1000-capture-walls";
import * as seriesList from "./20261201t1001-series-list";
import * as review from "./20261201t1100-review";
import * as publications from "./20261201t1101-publications";
import * as mail from "./20261201t1102-mail";
import * as publicLookups from "./20261201t1103-public-lookups";
import * as labLookup from "./20261201t1104-lab-lookup";
import * as tableColumns from "./20261201t1310-table-columns";
import * as keeping from "./20261201t1320-keeping";
import * as accountAddress from "./20261201t1330-account-address";

export const MIGRATIONS: Readonly<Record<string, Migration>> = {
  "20261201t0900-people": people,
  "20261201t0901-capture": capture,
  "20261201t0902-analyses": analyses,
  "20261201t0903-audit": audit,
  "20261201t0904-lookups": lookups,
  "20261201t1000-capture-walls": captureWalls,
  "20261201t1001-series-list": seriesList,
  "20261201t1100-review": review,
  "20261201t1101-publications": publications,
  "20261201t1102-mail": mail,
  "20261201t1103-public-lookups": publicLookups,
  "20261201t1104-lab-lookup": labLookup,
  "20261201t1310-table-columns": tableColumns,
  "20261201t1320-keeping": keeping,
  "20261201t1330-account-address": accountAddress,
};
