import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('the Monday after the clocks went forward, at 07:10', '2026-03-30T06:10:00Z')
