"""What is read from and written to the disk: meshes, the bait file and the output folder."""
