import type { CheckReport, CheckReportRow } from "@/lib/checks/report";
import { asHtml, html, type Html } from "@/lib/html/html";

/** Value, expected, tolerance and source of every check. On a phone a check is three lines. */
export const toCheckTable = ({ subjects }: Pick<CheckReport, "subjects">): Html =>
  html`<table class="checks">
    <thead>
      <tr>
        <th scope="col">Check</th>
        <th scope="col">Our value</th>
        <th scope="col">Expected</th>
        <th scope="col">Tolerance</th>
        <th scope="col"><span class="sr-only">Verdict</span></th>
        <th scope="col">Source</th>
      </tr>
    </thead>
    ${subjects.map(
      ({ name, rows, tables }) =>
        html`<tbody>
          <tr>
            <th scope="rowgroup" colspan="6">${name}</th>
          </tr>
          ${rows.map(toCheckRow)}
          ${tables.map(
            ({ name: table, count, agreeing, furthest }) =>
              html`<tr>
                  <td colspan="6" class="dim">
                    ${agreeing} of ${count} values agree: ${table}. The furthest off:
                  </td>
                </tr>
                ${toCheckRow(furthest)}`,
          )}
        </tbody>`,
    )}
  </table>`;

const AGREES = asHtml(
  '<svg width="16" height="16" viewBox="0 0 16 16" role="img" aria-label="agrees"><path d="M3 8.5 6.5 12 13 4" fill="none" stroke="currentColor" stroke-width="2.2"/></svg>',
);
const DISAGREES = asHtml(
  '<svg width="16" height="16" viewBox="0 0 16 16" role="img" aria-label="does not agree"><path d="M3.5 3.5l9 9m0-9l-9 9" stroke="currentColor" stroke-width="2.2"/></svg>',
);

const toCheckRow = (row: CheckReportRow): Html =>
  html`<tr class="check">
    <td>${row.what}</td>
    <td>${row.value}</td>
    <td><span class="due">due </span>${row.expected}</td>
    <td><span class="due">± </span>${row.tolerance}</td>
    <td class="${row.agrees ? "" : "fault"}">${row.agrees ? AGREES : DISAGREES}</td>
    <td>${row.source}</td>
  </tr>`;
