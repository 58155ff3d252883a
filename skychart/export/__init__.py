"""Chart data in open file formats."""
