import { BooksScreen } from '@/modules/books/books-screen'

export default BooksScreen
