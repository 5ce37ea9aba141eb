"""What is shown: the stations, the figures and the files to take away. No statistic is computed here."""
