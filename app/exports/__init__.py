"""The files a study can be taken away in: workbook, slides, pictures. Each is a plain function from findings to bytes."""
