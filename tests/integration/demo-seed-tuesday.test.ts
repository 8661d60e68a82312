import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Tuesday at 11:00', '2026-12-01T11:00:00Z')
