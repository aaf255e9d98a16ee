"""What is published: materials, rolled sections, limits and worked jobs, with their sources."""
