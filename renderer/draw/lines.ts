/** Text broken into lines for drawings, measured with the page's own faces. */
export interface Face {
  font: string;
  lineHeight: number;
}

let pen: CanvasRenderingContext2D | null = null;

function widthOf(text: string, font: string): number {
  pen ??= document.createElement("canvas").getContext("2d");
  if (!pen) return text.length * 7;
  pen.font = font;
  return pen.measureText(text).width;
}

/** Breaks at blanks only; a figure and its unit (a no-break space) stay together. */
export function wrap(text: string, width: number, { font }: Face): string[] {
  const lines: string[] = [];
  let line = "";
  for (const word of text.split(" ")) {
    const longer = line === "" ? word : `${line} ${word}`;
    if (line !== "" && widthOf(longer, font) > width) {
      lines.push(line);
      line = word;
    } else line = longer;
  }
  if (line !== "") lines.push(line);
  return lines;
}
