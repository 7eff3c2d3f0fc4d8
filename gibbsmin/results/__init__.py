"""What a study found: its states and cautions as an object, and as the files of a result folder."""
