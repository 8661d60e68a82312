/** Stands beside what is demo data in a foundry that is not the demo itself. */
export function DemoMark({ className = '' }: { className?: string }) {
  return <span className={`demo-mark ${className}`}>Demo</span>
}
