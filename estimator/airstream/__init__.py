"""The airstream: one device a module, their fixed order, and the solver of couplings."""
