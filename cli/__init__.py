"""Job files, commands, tables and files for people."""
