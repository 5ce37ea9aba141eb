from app.stations import lay_out

lay_out.show()
