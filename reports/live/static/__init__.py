"""The page's own files, served as they are."""
