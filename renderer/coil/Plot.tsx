/** A curve to look into closely: the plotting library is fetched only here, after the page is drawn. */
import type { Config, Data, Layout, PlotlyHTMLElement } from "plotly.js-dist-min";
import { memo, useEffect, useRef, useState } from "react";
import { axisTicks, extentOf, type Range } from "./axis.ts";

/** What an axis is of; its numbers are SI and get the unit with a fitting prefix. */
interface Axis {
  words: string;
  unit: string;
  log?: boolean;
}

interface Props {
  data: (ink: Ink) => Data[];
  x: Axis;
  y: Axis;
  label: string;
  height?: number;
}

/** The sheet's colours by role, as they are on this paper. */
export interface Ink {
  ink: string;
  faint: string;
  rule: string;
  fit: string;
  spark: string;
  warning: string;
}

function inkOfPage(): Ink {
  const style = getComputedStyle(document.documentElement);
  const of = (name: string) => style.getPropertyValue(`--${name}`).trim();
  return {
    ink: of("ink"),
    faint: of("faint"),
    rule: of("rule"),
    fit: of("fit"),
    spark: of("spark"),
    warning: of("warning"),
  };
}

const config: Partial<Config> = {
  displayModeBar: false,
  responsive: true,
  doubleClick: "reset",
  scrollZoom: false,
};

function layoutOf(
  { x, y, height = 260 }: Pick<Props, "x" | "y" | "height">,
  data: Data[],
  { ink, faint, rule }: Ink,
): Partial<Layout> {
  const axis = (of: Axis, name: "x" | "y") => {
    const range = extentOf(data, name, of.log ?? false);
    return {
      color: faint,
      gridcolor: rule,
      griddash: "dot" as const,
      zeroline: false,
      automargin: true,
      linecolor: rule,
      title: { text: of.words },
      type: of.log ? ("log" as const) : ("linear" as const),
      range,
      ...ticksOf(range, of),
    };
  };
  return {
    height,
    margin: { l: 70, r: 14, t: 12, b: 46 },
    paper_bgcolor: "rgba(0,0,0,0)",
    plot_bgcolor: "rgba(0,0,0,0)",
    font: { family: getComputedStyle(document.body).fontFamily, size: 13, color: ink },
    showlegend: false,
    hovermode: "closest",
    dragmode: "zoom",
    xaxis: axis(x, "x"),
    yaxis: axis(y, "y"),
  };
}

const ticksOf = (range: Range, { unit, log }: Axis) => axisTicks(range, unit, log ?? false);

/** The library's own ticks know another format: after every zoom the sheet's are laid on the new stretch. */
function ticksFollow(library: Library, plot: PlotlyHTMLElement, x: Axis, y: Axis): void {
  plot.removeAllListeners("plotly_relayout");
  plot.on("plotly_relayout", (change) => {
    if (!Object.keys(change).some((key) => /range/.test(key))) return;
    const { xaxis, yaxis } = plot.layout;
    if (!xaxis?.range || !yaxis?.range) return;
    const [onX, onY] = [ticksOf(xaxis.range as Range, x), ticksOf(yaxis.range as Range, y)];
    void library.relayout(plot, {
      "xaxis.tickvals": onX.tickvals,
      "xaxis.ticktext": onX.ticktext,
      "yaxis.tickvals": onY.tickvals,
      "yaxis.ticktext": onY.ticktext,
    } as Partial<Layout>);
  });
}

/** A printed page is narrower than the window: with a view box the drawing shrinks to it (see print styles). */
function scalesInPrint(plot: PlotlyHTMLElement): void {
  const setBoxes = () => {
    for (const layer of plot.querySelectorAll(".main-svg"))
      layer.setAttribute(
        "viewBox",
        `0 0 ${layer.getAttribute("width") ?? 0} ${layer.getAttribute("height") ?? 0}`,
      );
  };
  setBoxes();
  plot.removeAllListeners("plotly_afterplot");
  plot.on("plotly_afterplot", setBoxes);
}

type Library = typeof import("plotly.js-dist-min");

const load = async (): Promise<Library> => {
  const module = await import("plotly.js-dist-min");
  return "default" in module ? (module.default as unknown as Library) : module;
};

export const Plot = memo(function Plot(props: Props) {
  const { data, x, y, height, label } = props;
  const box = useRef<HTMLDivElement>(null);
  const [library, setLibrary] = useState<Library | null>(null);
  const [problem, setProblem] = useState<string | null>(null);

  useEffect(() => {
    const element = box.current;
    let wanted: Library | null | false = null;
    load().then(
      (loaded) => {
        if (wanted === false) return;
        wanted = loaded;
        setLibrary(() => loaded);
      },
      () => setProblem("The curve could not be drawn; the table holds its figures."),
    );
    return () => {
      if (wanted && element) wanted.purge(element);
      wanted = false;
    };
  }, []);

  useEffect(() => {
    const element = box.current;
    if (!library || !element) return undefined;
    const plot = element as unknown as PlotlyHTMLElement;
    const draw = async () => {
      const ink = inkOfPage();
      const curves = data(ink);
      await library.react(plot, curves, layoutOf({ x, y, height }, curves, ink), config);
      ticksFollow(library, plot, x, y);
      scalesInPrint(plot);
    };
    void draw();
    const paper = new MutationObserver(() => void draw());
    paper.observe(document.documentElement, { attributeFilter: ["data-paper"] });
    return () => paper.disconnect();
  }, [library, data, x, y, height]);

  if (problem) return <p className="quiet">{problem}</p>;
  return (
    <div ref={box} className="plot" role="img" aria-label={label} style={{ minHeight: height ?? 260 }} />
  );
});
