"""Exact units and rounding: the edge between what people type and what the ledger holds."""
