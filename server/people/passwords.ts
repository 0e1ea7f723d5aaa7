/** argon2id with the parameters OWASP names as its minimum: 19 MiB, two passes, one lane. Loaded when first needed. */
const cost = { memoryCost: 19_456, timeCost: 2, parallelism: 1 }

export async function hashPassword(password: string): Promise<string> {
  const { hash } = await import('@node-rs/argon2')
  return hash(password, cost)
}

/** Of an unknown account the same work is done, so that the time taken tells nothing. */
const nobodysHash =
  '$argon2id$v=19$m=19456,t=2,p=1$c29tZXNhbHRzb21lc2FsdA$NRcWhGHq4ioYw9vsdvUVOPHT2lGrHwhdnWYBVL2tUGs'

export async function passwordMatches(
  password: string,
  hash: string | undefined,
): Promise<boolean> {
  const { verify } = await import('@node-rs/argon2')
  const matches = await verify(hash ?? nobodysHash, password)
  return matches && hash !== undefined
}
