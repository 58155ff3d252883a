"""What a page shows, as frozen dataclasses of finished numbers."""
