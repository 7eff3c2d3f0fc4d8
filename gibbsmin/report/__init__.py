"""Results into what people read: terminal tables, spreadsheets, the result folder. Nothing is solved here."""
