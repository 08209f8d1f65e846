/** Head of a sheet: what it is about, what stands beside it, which page of the book it is. */
import { useEffect, type ReactNode } from "react";
import { hrefOf } from "../state/route.ts";

interface Props {
  title: ReactNode;
  plainTitle: string;
  beside?: ReactNode;
  page?: string;
}

export function SheetHead({ title, plainTitle, beside, page }: Props) {
  useEffect(() => {
    document.title = `${plainTitle} – Ringbook`;
  }, [plainTitle]);
  return (
    <header className="sheet-head">
      <h1>{title}</h1>
      {beside && <p className="beside">{beside}</p>}
      <p className="page-number">
        {plainTitle !== "Contents" && <a href={hrefOf({ view: "book" })}>contents</a>}
        {page && <> · {page}</>}
      </p>
    </header>
  );
}
