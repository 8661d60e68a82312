import { describeDemoAt } from '@/tests/setup/demo-floor'

describeDemoAt('a Friday just after midnight', '2026-12-11T00:02:00Z')
