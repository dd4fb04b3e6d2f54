package words

// Certificates, reports and day sheets.
var ()
