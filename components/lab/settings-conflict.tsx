import { Button } from "../parts/button";
import { FaultBar } from "../parts/fault-bar";
import type { SettingDifference } from "./settings-words";

interface SettingsConflictProps {
  differences: readonly SettingDifference[];
  onTakeTheirs: () => void;
  onKeepMine: () => void;
  busy: boolean;
}

/** Another admin saved meanwhile: both values side by side, and the choice. */
export function SettingsConflict(props: SettingsConflictProps) {
  return (
    <FaultBar
      className="my-4"
      title="Another admin changed the settings meanwhile"
      actions={
        <>
          <Button onClick={props.onTakeTheirs}>Take theirs</Button>
          <Button tone="decision" busy={props.busy} onClick={props.onKeepMine}>
            Save mine over it
          </Button>
        </>
      }
    >
      {props.differences.length === 0 ? (
        <p>Both are the same by now.</p>
      ) : (
        <table className="w-full max-w-prose border-collapse text-left text-small">
          <thead>
            <tr className="figures text-label text-ink-2">
              {["what differs", "theirs", "yours"].map((head) => (
                <th key={head} scope="col" className="py-1 pr-3 font-medium">
                  {head}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {props.differences.map(({ label, theirs, mine }) => (
              <tr key={label}>
                <th scope="row" className="border-t border-rule py-1 pr-3 font-normal">
                  {label}
                </th>
                <td className="border-t border-rule py-1 pr-3">{theirs}</td>
                <td className="border-t border-rule py-1">{mine}</td>
              </tr>
            ))}
          </tbody>
        </table>
      )}
    </FaultBar>
  );
}
