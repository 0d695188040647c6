"""What the world outside has published, run through job files and the ledger. One file for each source."""
