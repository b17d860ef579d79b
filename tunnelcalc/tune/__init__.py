"""The use case "what would do": a parameter of a class varied where no class is adequate."""
