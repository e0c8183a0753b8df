"""The page: a report in one file, with a second checker inside it."""
