import fc from 'fast-check'

/** One seed for all property tests: a failure on one machine is the same failure on every other. */
fc.configureGlobal({ seed: 20261201 })
