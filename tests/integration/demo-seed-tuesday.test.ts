import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Tuesday at 17:42, after closing time', '2026-12-01T17:42:20Z')
