"""Laws of the ledger, on jobs drawn at random."""
