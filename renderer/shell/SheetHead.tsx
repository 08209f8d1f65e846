/** Head of a sheet: what it is about, what stands beside it, which page of the book it is. */
import { useEffect, type ReactNode } from "react";
import { hrefOf } from "../state/route.ts";

interface Props {
  title: ReactNode;
  plainTitle: string;
  beside?: ReactNode;
  /** Where in the book this is; without it the sheet is the contents itself. */
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
        {page !== undefined && <a href={hrefOf({ view: "book" })}>contents</a>}
        {page && <> · {page}</>}
      </p>
    </header>
  );
}
