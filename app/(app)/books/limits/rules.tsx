import { RulesScreen } from '@/modules/limits/rules-screen'

export default RulesScreen
