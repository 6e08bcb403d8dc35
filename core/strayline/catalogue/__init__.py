"""Data: causes with priors, tests, questions, and the words for people (one file per language)."""
