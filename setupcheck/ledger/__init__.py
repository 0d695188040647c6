"""The ledger: for each surface the linear account of every cause it has inherited. Lengths mm, angles rad.

It knows no job file, no machine and no device: causes and geometry in, figures out.
"""
