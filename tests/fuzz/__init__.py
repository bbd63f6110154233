"""Random and damaged books: whatever is in a file, a person meets a report or a refusal, never a traceback."""
