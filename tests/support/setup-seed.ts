import fc from 'fast-check'

/** The same drawn inputs in every run, so that a failure comes back; PROPERTY_SEED asks for others. */
fc.configureGlobal({ seed: Number(process.env.PROPERTY_SEED ?? 20261201) })
