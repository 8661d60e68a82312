import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Monday at 06:00', '2026-11-30T06:00:00Z')
