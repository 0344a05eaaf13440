// Moving the reading place to what has just appeared.

const TRIES = 20;
const TRY_EVERY_MS = 50;

/** Put the cursor into an element as soon as it is on the page. */
export function focusSoon(id: string, tries = TRIES): void {
  const element = document.getElementById(id);
  if (element !== null) {
    element.scrollIntoView({ block: "center" });
    element.focus({ preventScroll: true });
  } else if (tries > 0) setTimeout(() => focusSoon(id, tries - 1), TRY_EVERY_MS);
}

/** Bring a heading into view and put the reading place there. */
export function jumpTo(id: string): void {
  const target = document.getElementById(id);
  target?.scrollIntoView({ block: "start" });
  target?.focus({ preventScroll: true });
}
