import { LimitsScreen } from '@/modules/limits/limits-screen'

export default LimitsScreen
