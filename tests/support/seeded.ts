import fc from 'fast-check'

// Properties are tried on the same examples in every run, so that a red run can be run again as it was.
fc.configureGlobal({ seed: 417 })
