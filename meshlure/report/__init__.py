"""The report of a study as one page that can be read, printed and kept."""
