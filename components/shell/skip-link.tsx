/** The first stop of the Tab key. The page's main element has the id "main" and tabIndex -1. */
export function SkipLink() {
  return (
    <a
      href="#main"
      className="absolute top-2 left-2 z-50 -translate-y-16 bg-text px-3 py-2 text-ground focus:translate-y-0"
    >
      Skip to content
    </a>
  )
}
