"""Arches: hanging curves stood up, with thickness.

From the bottom up: `shapes` (the curve), `parallel` (a line beside it, in place), `fit` (which curve meets springings
and a fact), `ring` (intrados, axis and extrados with their feet), `cuts` and `blocks` (bodies between joints),
`thrust`, `setting_out`. These know numbers alone. `asked`, `making`, `figures`, `views`, `bodies`, `cautions` and
`filling` make a piece of a design of them.
"""
