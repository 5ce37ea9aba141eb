from app.stations import answer

answer.show()
