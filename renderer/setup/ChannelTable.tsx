/** The file's columns as they were read: role, unit, scale, resolution; role and scale can be put right. */
import { channelRoles } from "../../analysis/capture.ts";
import type { CaptureReading, ChannelReading } from "../../analysis/reading-format.ts";
import type { Setup, SetupChannel } from "../../analysis/setup/schema.ts";
import { parseEntry } from "../format/entry.ts";
import { plain, stated } from "../format/figure.ts";
import { withChannel } from "./channels.ts";
import { roleName } from "../pulse/panels.ts";
import type { Change } from "./SetupCard.tsx";

interface Props {
  setup: Setup;
  reading: CaptureReading;
  onChange: Change;
}

export function ChannelTable({ setup, reading, onChange }: Props) {
  const put = (position: number, channel: ChannelReading, part: Partial<SetupChannel>) =>
    onChange({ channels: withChannel(setup, channel.name, position, part) });
  return (
    <div className="wide-table">
      <table className="channels">
        <caption>Columns of the file</caption>
        <thead>
          <tr>
            <th scope="col">column</th>
            <th scope="col">it is the</th>
            <th scope="col">probe ×</th>
            <th scope="col">unit in the file</th>
            <th scope="col">from … to</th>
            <th scope="col">resolution</th>
            <th scope="col">off the screen</th>
          </tr>
        </thead>
        <tbody>
          {reading.channels.map((channel, position) => (
            <tr key={channel.name}>
              <th scope="row">{channel.name}</th>
              <td>
                <select
                  aria-label={`role of ${channel.name}`}
                  value={channel.role}
                  onChange={(event) =>
                    put(position, channel, { role: event.target.value as SetupChannel["role"] })
                  }
                >
                  {channelRoles.map((role) => (
                    <option key={role} value={role}>
                      {roleName(role)}
                    </option>
                  ))}
                </select>
                {channel.roleGuessed && <span className="guessed"> guessed</span>}
              </td>
              <td>
                <input
                  key={channel.scale}
                  className="short"
                  aria-label={`probe factor of ${channel.name}`}
                  aria-describedby="probe-help"
                  defaultValue={stated(channel.scale, "")}
                  onBlur={(event) => {
                    const scale = parseEntry(event.target.value, "");
                    if (scale !== null && scale !== 0 && scale !== channel.scale)
                      put(position, channel, { scale });
                  }}
                  onKeyDown={(event) => event.key === "Enter" && event.currentTarget.blur()}
                />
              </td>
              <td>{channel.fileUnit ?? "none"}</td>
              <td className="tabular">
                {plain(channel.minimum, channel.unit)} … {plain(channel.maximum, channel.unit)}
              </td>
              <td className="tabular">{plain(channel.lsb, channel.unit, 2)}</td>
              <td>{channel.overrange === 0 ? "nothing" : `${channel.overrange} samples`}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <p id="probe-help" className="quiet">
        Probe ×: 1 where the scope was told of the probe and multiplied already, as most do. Else 10 for a 10×
        probe, 1k for a 1000× divider, 10 for a clamp of 100 mV/A. The reach beside it is after
        multiplication: the resting level of the switch node is the supply.
      </p>
    </div>
  );
}
