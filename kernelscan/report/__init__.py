"""The answers as data: JSON, CSV and terminal tables."""
