import { UnsentScreen } from '@/modules/drains/unsent-screen'

export default UnsentScreen
