"""The byte ledger: spans of the drafter's file, what is cut out of it and spliced into it."""
