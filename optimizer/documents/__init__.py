"""Results as documents: page, workbook, drawing."""
