"""One published phenomenon a file. Imports numpy and the data tables, nothing above them."""
