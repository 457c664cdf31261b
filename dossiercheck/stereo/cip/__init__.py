"""The descriptor engine: stereogenic units, their ranking by the Sequence Rules, their letters.

Sequence rules after R. M. Hanson, S. Musacchio, J. W. Mayfield, M. J. Vainio, A. Yerin, D. Redkin,
J. Chem. Inf. Model. 2018, 58, 1755, and IUPAC Recommendations 2013, P-92. Shares nothing with the
structure library's labeller but the parsed atoms, bonds and coordinates.
"""
