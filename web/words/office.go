package words

// Set-up: accounts, programmes, calibres, depositors, the journal.
var ()
