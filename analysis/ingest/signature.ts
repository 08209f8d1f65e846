import type { Axes } from "./axes.ts";
import type { Dialect } from "./dialect.ts";
import type { Header } from "./header.ts";
import type { NamedUnit } from "./units.ts";

/** Files of the same layout get the same short text: answers given for one hold for the others. */
export function signatureOf(
  dialect: Dialect,
  header: Header,
  axes: Axes,
  names: Map<number, NamedUnit>,
): string {
  const parts = [
    dialect,
    header.settings.map(({ key }) => key),
    axes.groups,
    axes.counter,
    [...names.values()].map(({ name, spelled }) => [name, spelled]),
  ];
  return fnv1a(JSON.stringify(parts));
}

/** FNV-1a, 32 bits, twice with different bases (Fowler, Noll and Vo; RFC 9923). */
function fnv1a(text: string): string {
  const run = (basis: number) => {
    let hash = basis;
    for (let i = 0; i < text.length; i++) hash = Math.imul(hash ^ text.charCodeAt(i), 0x01000193);
    return (hash >>> 0).toString(16).padStart(8, "0");
  };
  return run(0x811c9dc5) + run(0x01234567);
}
