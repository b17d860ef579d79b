"""The methods that come with the distribution as lines of a calculation sheet.

Beside each line stands the result of the function that computed the run: the formula is text, and
shows whether both say the same.
"""
