"""What could break the promises made of the ledger, tried on the real tables."""
