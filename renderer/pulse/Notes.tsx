/** Leader lines, and the notes they end at: in the margin, or numbered below on a narrow page. */
import { leaderCorners } from "../draw/leaders.ts";
import { circlePath, lozengePath } from "../draw/glyph.ts";
import { faces, type Frame, type PlacedNote } from "./layout.ts";

interface Lit {
  placed: PlacedNote[];
  lit: string | null;
}

export function Leaders({ placed, frame, lit }: Lit & { frame: Frame }) {
  return placed.map(({ note, number, lane, top }) => {
    if (!lane) return null;
    const isLit = lit === note.id ? " lit" : "";
    const mark =
      note.id === "spark" && note.tone === "spark"
        ? lozengePath(lane.x, lane.y, 5)
        : circlePath(lane.x, lane.y, 3);
    if (frame.notesX === null)
      return (
        <g key={note.id} className={`place tone-${note.tone}${isLit}`}>
          <path d={mark} />
          <text
            className="number"
            x={lane.x}
            y={lane.y + (lane.side === "above" ? -9 : 19)}
            textAnchor="middle"
          >
            {number}
          </text>
        </g>
      );
    const end = top + 10;
    const turn = frame.plotWidth + 4;
    const stop = frame.notesX - 18;
    return (
      <g key={note.id} className={`place tone-${note.tone}${isLit}`}>
        <path
          className="leader"
          data-note={note.id}
          d={`M${leaderCorners(lane, end, turn, stop).join("L")}H${frame.notesX - 5}`}
        />
        <path d={mark} />
      </g>
    );
  });
}

interface Written extends Lit {
  onLight(id: string | null): void;
}

export function WrittenNotes({ placed, x, lit, onLight }: Written & { x: number }) {
  return placed.map(({ note, title, text, top, lane }) => {
    const second = top + title.length * faces.title.lineHeight;
    const faded = lane || note.place_s === null ? "" : " out-of-view";
    return (
      <g
        key={note.id}
        className={`note tone-${note.tone}${lit === note.id ? " lit" : ""}${faded}`}
        data-note={note.id}
        tabIndex={0}
        role="note"
        aria-label={`${note.title}. ${note.text}`}
        onPointerEnter={() => onLight(note.id)}
        onPointerLeave={() => onLight(null)}
        onFocus={() => onLight(note.id)}
        onBlur={() => onLight(null)}
      >
        {title.map((line, at) => (
          <text key={line} className="note-title" x={x} y={top + 15 + at * faces.title.lineHeight}>
            {line}
          </text>
        ))}
        {text.map((line, at) => (
          <text
            key={`${at} ${line}`}
            className="note-text"
            x={x}
            y={second + 13 + at * faces.text.lineHeight}
          >
            {line}
          </text>
        ))}
      </g>
    );
  });
}

export function NoteList({ placed, lit, onLight }: Written) {
  return (
    <ol className="note-list">
      {placed.map(({ note }) => (
        <li
          key={note.id}
          className={`tone-${note.tone}${lit === note.id ? " lit" : ""}`}
          onPointerEnter={() => onLight(note.id)}
          onPointerLeave={() => onLight(null)}
        >
          <strong>{note.title}</strong> {note.text}
        </li>
      ))}
    </ol>
  );
}
