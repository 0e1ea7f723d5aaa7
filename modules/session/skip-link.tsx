import { useTranslation } from 'react-i18next'

/** First stop of the keyboard: past the bar, to the page. */
export function SkipLink() {
  const { t } = useTranslation()
  return (
    <a
      className="skip-link"
      href="#main"
      onClick={(event) => {
        // A hash would become part of the route: the focus is moved instead.
        event.preventDefault()
        const main = document.getElementById('main')
        main?.setAttribute('tabindex', '-1')
        main?.focus()
      }}
    >
      {t('ui.skip')}
    </a>
  )
}
