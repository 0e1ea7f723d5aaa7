import { YardScreen } from '@/modules/yard/yard-screen'

export default YardScreen
