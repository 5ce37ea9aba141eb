from app.stations import bring

bring.show()
