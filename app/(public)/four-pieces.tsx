/** The product in four pieces of one bar, the last lifted a hair, as in the mark. */
export function FourPieces({ steps }: { steps: readonly (readonly [string, string])[] }) {
  return (
    <ol className="grid grid-cols-1 gap-px border bg-rule sm:grid-cols-2 lg:grid-cols-4">
      {steps.map(([title, words], index) => (
        <li
          key={title}
          className={`bg-sheet px-5 py-5 ${index === 3 ? 'border-t-[3px] border-verdigris lg:-mt-1.5' : 'border-t-[3px] border-rule'}`}
        >
          <h2 className="mb-1.5 font-heading text-lead font-bold">{title}</h2>
          <p className="text-ink-soft">{words}</p>
        </li>
      ))}
    </ol>
  )
}
