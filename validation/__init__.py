"""The validation library: cases with cited references, and the runner that compares the tool with them.

Works as `validation` in a checkout and as `xsec_fem.validation` in an installed wheel; every import in it is relative, so
that it never mixes the two. The package xsec_fem itself imports it only to run the command `xsec-fem validate`.
"""
