package words

// The QA lead's pages: batches, batch, rate sheet, trends.
var ()
