/** A drawing of the page as a file that stands alone: the style sheet's ink is written into it. */

const inked = [
  "fill",
  "stroke",
  "stroke-width",
  "stroke-dasharray",
  "stroke-linejoin",
  "stroke-linecap",
  "opacity",
  "paint-order",
  "font-family",
  "font-size",
  "font-weight",
  "font-style",
  "text-anchor",
];

export function standAlone(drawing: SVGSVGElement): { text: string; width: number; height: number } {
  const copy = drawing.cloneNode(true) as SVGSVGElement;
  const originals = [drawing, ...drawing.querySelectorAll("*")];
  const copies = [copy, ...copy.querySelectorAll("*")];
  originals.forEach((original, at) => {
    const style = getComputedStyle(original);
    for (const property of inked) copies[at].setAttribute(property, style.getPropertyValue(property));
    copies[at].removeAttribute("class");
  });
  const { width, height } = drawing.viewBox.baseVal;
  copy.setAttribute("xmlns", "http://www.w3.org/2000/svg");
  copy.setAttribute("width", String(width));
  copy.setAttribute("height", String(height));
  copy.style.background = getComputedStyle(document.body).backgroundColor;
  return { text: new XMLSerializer().serializeToString(copy), width, height };
}

export async function saveSvg(drawing: SVGSVGElement, name: string): Promise<string> {
  return save(new Blob([standAlone(drawing).text], { type: "image/svg+xml" }), `${fileName(name)}.svg`);
}

export async function savePng(drawing: SVGSVGElement, name: string): Promise<string> {
  const { text, width, height } = standAlone(drawing);
  const image = new Image();
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(text)}`;
  await image.decode();
  const canvas = document.createElement("canvas");
  // Twice the page's pixels, so that it stays sharp in print.
  canvas.width = width * 2;
  canvas.height = height * 2;
  const pen = canvas.getContext("2d");
  if (!pen) throw new Error("This browser gives no canvas to draw the picture on; save it as SVG.");
  pen.fillStyle = getComputedStyle(document.body).backgroundColor;
  pen.fillRect(0, 0, canvas.width, canvas.height);
  pen.drawImage(image, 0, 0, canvas.width, canvas.height);
  const blob = await new Promise<Blob | null>((done) => canvas.toBlob(done, "image/png"));
  if (!blob) throw new Error("The picture is too large for this browser; save it as SVG.");
  return save(blob, `${fileName(name)}.png`);
}

const fileName = (name: string) =>
  name
    .replace(/[^\p{L}\p{N} _.-]+/gu, " ")
    .trim()
    .slice(0, 80) || "ringbook";

export function save(blob: Blob, name: string): string {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(blob);
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000);
  return name;
}
