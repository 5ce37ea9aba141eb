from app.stations import tell

tell.show()
