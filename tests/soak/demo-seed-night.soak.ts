import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Wednesday at 03:00', '2026-12-02T03:00:00Z')
