from app.stations import compare

compare.show()
