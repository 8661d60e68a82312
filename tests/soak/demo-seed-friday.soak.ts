import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Friday at 16:50', '2026-12-04T16:50:00Z')
