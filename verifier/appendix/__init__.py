"""The LaTeX appendix: printed from certificates, computing nothing."""
