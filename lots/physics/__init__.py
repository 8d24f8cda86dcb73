"""Sugar solutions, water, instruments, colour, filling and sap: pure arithmetic, no I/O."""
