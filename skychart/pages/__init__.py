"""The HTML pages: from finished chart data to a folder of files that opens from disk."""
