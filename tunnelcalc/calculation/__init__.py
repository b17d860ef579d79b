"""A calculation as it stands on paper: lines with a formula, the numbers put in and the result."""
