const CAUTIONS = {
  metal: 'Damp shells and molten metal do not meet: trapped water throws metal. When in doubt, dry it longer.',
  dust: 'Silica dust harms lungs: look over wet-wiped or under extraction, no blowing off and no dry sweeping.',
} as const

/** A short caution where the act is, and who decides. */
export function Caution({ about }: { about: keyof typeof CAUTIONS }) {
  return (
    <p className="caution">
      <b>{CAUTIONS[about]}</b> Follow the law where you are, the supplier’s data sheets and licensed practice; this program advises, people
      decide.
    </p>
  )
}
