"""What users bring: files to text and arrays."""
