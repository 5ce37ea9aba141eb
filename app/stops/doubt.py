from app.stations import doubt

doubt.show()
