"""The declared design: reading a designer's file into a validated model, with the place of every value."""
