import { Router } from 'express'
import { rateLimit } from 'express-rate-limit'
import { problem } from '../problem'

export type RateSettings = {
  /** Requests of one address in a minute. */
  perMinute: number
  /** Tries to sign in, to set up or to verify, of one address in a minute. */
  guessesPerMinute: number
}

export const usualRates: RateSettings = { perMinute: 1200, guessesPerMinute: 20 }

/** A general limit, and a tight one where somebody could guess. */
export function rateLimits(settings: RateSettings): Router {
  const router = Router()
  const limit = (perMinute: number) =>
    rateLimit({
      windowMs: 60_000,
      limit: perMinute,
      standardHeaders: 'draft-8',
      legacyHeaders: false,
      handler: (_request, _response, next) => next(problem('too-many-requests')),
    })
  router.use(limit(settings.perMinute))
  const guesses = limit(settings.guessesPerMinute)
  router.post(['/session', '/organisation', '/me/password'], guesses)
  router.get('/verify/:hash', guesses)
  return router
}
