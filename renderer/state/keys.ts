/** One table of keys: what is pressed, what it does, where it works. The overview is drawn from it. */
import { useEffect, useLayoutEffect, useRef } from "react";

export interface KeyAction {
  /** As in KeyboardEvent.key, lower case; "shift+" and "ctrl+" before it ("ctrl" is also the command key). */
  key: string;
  /** For the overview: what it does. */
  does: string;
  act(): void;
}

interface Layer {
  where: string;
  actions: KeyAction[];
}

const layers: { current: Layer }[] = [];

/** What works on the page now, the innermost part first. */
export const activeLayers = (): Layer[] => layers.map((layer) => layer.current).toReversed();

function nameOf(event: KeyboardEvent): string {
  const key = event.key.toLowerCase();
  const ctrl = event.ctrlKey || event.metaKey ? "ctrl+" : "";
  // The shift that a "+" or "?" needs on many keyboards is no part of its name.
  const shift = event.shiftKey && (key.length > 1 || /[a-z]/.test(key)) ? "shift+" : "";
  return ctrl + shift + key;
}

function writes(target: EventTarget | null): boolean {
  if (!(target instanceof HTMLElement)) return false;
  return target.isContentEditable || /^(input|textarea|select)$/i.test(target.tagName);
}

function take(event: KeyboardEvent): void {
  if (event.defaultPrevented || event.altKey) return;
  const name = nameOf(event);
  if (event.target instanceof Element && event.target.closest("dialog[open]")) return;
  if (writes(event.target)) {
    // Escape leaves a field, and does nothing else.
    if (name === "escape") (event.target as HTMLElement).blur();
    return;
  }
  const pressesControl = event.target instanceof Element && event.target.closest("button, a, summary");
  if (pressesControl && (name === "enter" || name === " ")) return;
  for (const layer of layers.toReversed()) {
    const action = layer.current.actions.find((candidate) => candidate.key === name);
    if (!action) continue;
    event.preventDefault();
    action.act();
    return;
  }
}

/** Keys of one part of the page while it is shown; a later part wins over an earlier one. */
export function useKeys(where: string, actions: KeyAction[]): void {
  const layer = useRef<Layer>({ where, actions });
  useLayoutEffect(() => {
    layer.current = { where, actions };
  });
  useEffect(() => {
    if (layers.length === 0) window.addEventListener("keydown", take);
    layers.push(layer);
    return () => {
      layers.splice(layers.indexOf(layer), 1);
      if (layers.length === 0) window.removeEventListener("keydown", take);
    };
  }, []);
}

const spelled: Record<string, string> = {
  arrowleft: "←",
  arrowright: "→",
  arrowup: "↑",
  arrowdown: "↓",
  escape: "Esc",
  enter: "Enter",
  "ctrl+": "Ctrl ",
  "shift+": "Shift ",
};

/** "shift+arrowleft" → "Shift ←". */
export function keyText(key: string): string {
  const [, modifiers, bare] = /^((?:ctrl\+|shift\+)*)(.+)$/.exec(key)!;
  const before = modifiers.replace(/(ctrl\+|shift\+)/g, (part) => spelled[part]);
  return before + (spelled[bare] ?? bare.toUpperCase());
}
