"""The form a designer reads: polynomials and ratios in part names, factored, grouped, as few symbols as possible."""
