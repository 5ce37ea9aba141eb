"""What would make a careful reader doubt the answers, and how much the data can show of it."""
