import { NewestYearScreen } from '@/modules/books/newest-year-screen'

export default NewestYearScreen
