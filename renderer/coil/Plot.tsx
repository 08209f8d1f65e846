/** A curve to look into closely: the plotting library is fetched only here, after the page is drawn. */
import type { Config, Data, Layout, PlotlyHTMLElement } from "plotly.js-dist-min";
import { memo, useEffect, useRef, useState } from "react";

interface Props {
  data: (ink: Ink) => Data[];
  x: string;
  y: string;
  label: string;
  xLog?: boolean;
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
  { x, y, xLog, height = 260 }: Pick<Props, "x" | "y" | "xLog" | "height">,
  { ink, faint, rule }: Ink,
): Partial<Layout> {
  const axis = {
    color: faint,
    gridcolor: rule,
    griddash: "dot" as const,
    zeroline: false,
    exponentformat: "SI" as const,
    automargin: true,
    linecolor: rule,
  };
  return {
    height,
    margin: { l: 70, r: 10, t: 8, b: 46 },
    paper_bgcolor: "rgba(0,0,0,0)",
    plot_bgcolor: "rgba(0,0,0,0)",
    font: { family: getComputedStyle(document.body).fontFamily, size: 13, color: ink },
    showlegend: false,
    hovermode: "closest",
    dragmode: "zoom",
    xaxis: {
      ...axis,
      title: { text: x },
      type: xLog ? "log" : "linear",
      ...(xLog && { dtick: 1, exponentformat: "none" as const }),
    },
    yaxis: { ...axis, title: { text: y } },
  };
}

type Library = typeof import("plotly.js-dist-min");

const load = async (): Promise<Library> => {
  const module = await import("plotly.js-dist-min");
  return "default" in module ? (module.default as unknown as Library) : module;
};

export const Plot = memo(function Plot(props: Props) {
  const { data, x, y, xLog, height, label } = props;
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
    const draw = () => {
      const ink = inkOfPage();
      void library.react(
        element as unknown as PlotlyHTMLElement,
        data(ink),
        layoutOf({ x, y, xLog, height }, ink),
        config,
      );
    };
    draw();
    const paper = new MutationObserver(draw);
    paper.observe(document.documentElement, { attributeFilter: ["data-paper"] });
    return () => paper.disconnect();
  }, [library, data, x, y, xLog, height]);

  if (problem) return <p className="quiet">{problem}</p>;
  return (
    <div ref={box} className="plot" role="img" aria-label={label} style={{ minHeight: height ?? 260 }} />
  );
});
