import { planDemo } from '@/lib/demo/plan'
import { happenings } from '@/lib/demo/happenings'
import { oddness } from '@/lib/demo/work-hours'
const starts: Record<string,string> = { tue:'2026-12-01T11:00:00Z', mon:'2026-11-30T06:00:00Z', fri:'2026-12-04T16:50:00Z', sat:'2026-12-05T20:00:00Z', sun:'2026-12-06T12:00:00Z', spring:'2026-03-29T10:30:00Z', springMon:'2026-03-30T06:10:00Z', autumn:'2026-10-25T12:20:00Z', monnoon:'2026-11-30T12:00:00Z', wed3:'2026-12-02T03:00:00Z' }
for (const [n,s] of Object.entries(starts)) {
  console.time(n)
  try { const p = planDemo(Date.parse(s)); console.timeEnd(n)
  const h = happenings(p)
  console.log(n, 'trees', p.trees.length, 'events', h.length, 'runs', h.filter(x=>x.kind==='run').length, 'dips', p.trees.reduce((a,t)=>a+t.coats.length,0))
  for (const t of p.trees) { const l=t.coats.at(-1); if (l && oddness(p.hours,l.dippedAt)>0) console.log('   odd', t.tree.aim.kind, l.number, l.place, t.recessClass, t.spacing, new Date(l.dippedAt).toUTCString().slice(0,22)) }
  } catch (e) { console.log(n, (e as Error).message) }
}
