import './demo-mark.css'

/** Stands beside what is demo data in a foundry that is not the demo itself. */
export function DemoMark() {
  return <span className="demo-mark">Demo</span>
}
