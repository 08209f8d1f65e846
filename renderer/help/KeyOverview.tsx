/** All keys that work on the page now, drawn from the table that makes them work. */
import { useEffect, useRef } from "react";
import { activeLayers, keyText } from "../state/keys.ts";

export function KeyOverview({ onClose }: { onClose(): void }) {
  const dialog = useRef<HTMLDialogElement>(null);
  useEffect(() => {
    dialog.current?.showModal();
    // The way out has the focus and stands last; what is asked for stands first.
    dialog.current?.scrollTo(0, 0);
  }, []);
  const groups = new Map<string, Map<string, string>>();
  for (const { where, actions } of activeLayers()) {
    if (actions.length === 0) continue;
    const group = groups.get(where) ?? new Map<string, string>();
    for (const { key, does } of actions) group.set(key, does);
    groups.set(where, group);
  }
  return (
    <dialog ref={dialog} className="keys" aria-labelledby="keys-title" onClose={onClose}>
      <h2 id="keys-title">Keys on this page</h2>
      <div className="key-groups">
        {[...groups].map(([where, keys]) => (
          <section key={where}>
            <h3>{where}</h3>
            <dl>
              {[...keys].map(([key, does]) => (
                <div key={key}>
                  <dt>
                    <kbd>{keyText(key)}</kbd>
                  </dt>
                  <dd>{does}</dd>
                </div>
              ))}
            </dl>
          </section>
        ))}
      </div>
      <form method="dialog">
        <button type="submit">
          <kbd>Esc</kbd> close
        </button>
      </form>
    </dialog>
  );
}
