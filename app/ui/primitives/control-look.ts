/** The dress that text inputs, areas and selects share. */
export const controlLook =
  'block w-full rounded border border-edge bg-sheet px-2.5 text-ink placeholder:text-ink-soft ' +
  'aria-[invalid=true]:border-2 aria-[invalid=true]:border-madder ' +
  // Under 16 px some telephones zoom the page when a control takes the focus.
  'pointer-coarse:text-[1rem] ' +
  'disabled:bg-paper disabled:text-ink-soft ' +
  // A select counts as read-only to a style sheet, though it is as open to change as the others.
  '[&:read-only:not(select)]:bg-paper'
