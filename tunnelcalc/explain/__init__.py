"""The use case "explain a section of a run": from a run's folder to a calculation sheet.

One section is computed again, by the same registry and stages that computed the run, from the
inputs that the run kept. What comes out is set against the tables of the run, and every line is
computed once more from its formula.
"""
