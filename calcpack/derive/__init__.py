"""Why each number is right: steps whose printed digits close."""
