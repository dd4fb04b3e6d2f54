package words

// The technicians' pages: Today, intake, reading rounds, unloading.
var ()
