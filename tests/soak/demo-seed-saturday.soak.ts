import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Saturday at 20:00', '2026-12-05T20:00:00Z')
