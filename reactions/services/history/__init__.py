"""A lab's history coming in from its spreadsheet: upload, confirm the columns, check, store."""
