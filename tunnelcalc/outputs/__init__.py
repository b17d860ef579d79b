"""What a run leaves behind: tables, the manifest, and the folder that holds them."""
