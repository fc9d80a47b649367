import fc from 'fast-check'

// The same invented cases at every run: a failure is found again, and a run that passed passes.
fc.configureGlobal({ seed: 20_310_506 })
