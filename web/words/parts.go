package words

// Verdicts, ends, positions and criteria: the words of the trade that every page uses.
var (
	Verdict       = say("Verdict", "Verdict", "Urteil")
	VerdictPass   = say("pass", "réussi", "bestanden")
	VerdictFail   = say("fail", "échoué", "nicht bestanden")
	VerdictOpen   = say("open", "en cours", "offen")
	VerdictCannot = say("cannot pass", "éliminé", "ausgeschieden")
	VerdictNone   = say("no limits", "sans limites", "ohne Grenzwerte")
	SecondLook    = say("second look", "contre-lecture", "Kontrollablesung")

	EndRejected  = say("rejected", "refusé", "zurückgewiesen")
	EndWithdrawn = say("withdrawn", "retiré", "zurückgezogen")
	EndVoid      = say("void", "annulé", "ungültig")
	EndRemoved   = say("removed", "sorti", "herausgenommen").unsure(FR, DE)
	FailedIn     = say1("in {criteria}", "en {criteria}", "in {criteria}")

	PositionCH  = say("dial up", "cadran haut", "Zifferblatt oben")
	PositionFH  = say("dial down", "fond haut", "Zifferblatt unten")
	Position6H  = say("6 up", "6 h en haut", "6 oben")
	Position3H  = say("3 up", "3 h en haut", "3 oben")
	Position9H  = say("9 up", "9 h en haut", "9 oben")
	Position12H = say("12 up", "12 h en haut", "12 oben")

	Criterion         = say("Criterion", "Critère", "Kriterium")
	Criteria          = say("Criteria", "Critères", "Kriterien")
	Meaning           = say("Meaning", "Signification", "Bedeutung")
	ValueUnit         = say1("Value, {unit}", "Valeur, {unit}", "Wert, {unit}")
	LimitsUnit        = say1("Limits, {unit}", "Limites, {unit}", "Grenzwerte, {unit}")
	MarginUnit        = say1("Margin, {unit}", "Marge, {unit}", "Abstand, {unit}")
	BetweenLimits     = say("Between the limits", "Entre les limites", "Zwischen den Grenzwerten")
	MeanDailyRate     = say("Mean daily rate", "Marche diurne moyenne", "Mittlerer täglicher Gang")
	MeanVariation     = say("Mean variation", "Variation moyenne des marches", "Mittlere Gangabweichung")
	GreatestVariation = say("Greatest variation", "Plus grande variation des marches", "Größte Gangabweichung")
	FlatAndHanging    = say("Vertical less horizontal", "Différence plat-pendu", "Hängend weniger flach")
	GreatestDeviation = say("Greatest deviation", "Plus grand écart des marches", "Größte Abweichung")
	ByTemperature     = say("Variation with temperature", "Variation avec la température", "Gangänderung je Grad")
	Resumption        = say("Resumption of rate", "Reprise de marche", "Wiederaufnahme des Ganges")

	UnitSecondsPerDay = say("s/d", "s/d", "s/d")
	UnitPerDegree     = say("s/d per °C", "s/d par °C", "s/d je °C")
	UnitSeconds       = say("s", "s", "s")

	ProgrammeStrip = say("Programme day by day", "Programme jour par jour", "Prüfprogramm Tag für Tag")
	DayRead        = say("read", "relevé", "abgelesen")
	DayNow         = say("now", "en cours", "jetzt")
	DayAhead       = say("to come", "à venir", "noch offen")

	PlaceEmpty   = say("empty", "vide", "leer")
	PlaceBlocked = say("cannot be used", "inutilisable", "nicht benutzbar")
	PlaceRemoved = say("taken out", "sorti", "herausgenommen")
	PlaceToDo    = say("to read", "à relever", "abzulesen")
	PlaceHere    = say("to read now", "à relever maintenant", "jetzt abzulesen")
	PlaceRead    = say("read", "relevé", "abgelesen")
	PlaceKept    = say("kept on this device, not yet sent", "gardé sur cet appareil, pas encore envoyé", "auf diesem Gerät behalten, noch nicht gesendet")
	PlaceLook    = say("read again", "relever encore une fois", "noch einmal ablesen")
	PlaceNow     = say("now", "ici", "jetzt")
	HolderSeen   = say2("Holder {n}, {places}", "Porte-mouvements {n}, {places}", "Werkhalter {n}, {places}").unsure(FR, DE)
	HolderPlaces = plural("{n} place", "{n} places", "{n} emplacement", "{n} emplacements", "{n} Platz", "{n} Plätze")
	PlaceSays    = say3("Place {n}, {serial}: {state}", "Emplacement {n}, {serial} : {state}", "Platz {n}, {serial}: {state}")
	PlaceNothing = say2("Place {n}: {state}", "Emplacement {n} : {state}", "Platz {n}: {state}")
)

// Charts.
var (
	ChartMovements    = say("movements", "mouvements", "Werke")
	ChartTrialDay     = say("trial day", "jour d’épreuve", "Prüftag")
	ChartLimit        = say1("limit {value}", "limite {value}", "Grenze {value}")
	ChartNamedLimit   = say2("{symbol} limit {value}", "limite {symbol} {value}", "Grenze {symbol} {value}")
	ChartMean         = say1("mean {value}", "moyenne {value}", "Mittel {value}")
	ChartReplaced     = say1("replaced {value}", "remplacé {value}", "ersetzt {value}")
	ChartDayRate      = say4("Day {day}, {position}, {temperature}: {rate}", "Jour {day}, {position}, {temperature} : {rate}", "Tag {day}, {position}, {temperature}: {rate}")
	ChartDayFree      = say1("{point}, enters no criterion", "{point}, n’entre dans aucun critère", "{point}, geht in kein Kriterium ein")
	ChartTip          = say2("Day {day}: {rate}", "Jour {day} : {rate}", "Tag {day}: {rate}")
	ChartBin          = say3("{from} to {to}: {count}", "{from} à {to} : {count}", "{from} bis {to}: {count}")
	ChartRates        = say1("Daily rates of {serial} by day, with positions, temperatures and limits", "Marches diurnes de {serial} par jour, avec positions, températures et limites", "Tägliche Gänge von {serial} nach Tagen, mit Lagen, Temperaturen und Grenzwerten")
	ChartDistribution = say1("Distribution of {symbol} with its limits", "Répartition de {symbol} avec ses limites", "Verteilung von {symbol} mit den Grenzwerten")
	ChartPareto       = say("Failures by criterion", "Échecs par critère", "Nicht bestanden, nach Kriterium")
	ChartParetoRow    = say3("{symbol} {title}: {count}", "{symbol} {title} : {count}", "{symbol} {title}: {count}")
	ParetoAlone       = say("this criterion alone", "ce critère seul", "nur dieses Kriterium")
	ParetoTogether    = say("together with others", "avec d’autres", "zusammen mit anderen")
	ChartEmptyTitle   = say("Nothing to draw yet", "Rien à dessiner pour l’instant", "Noch nichts zu zeichnen")
	ChartEmptyRates   = say("The first rate appears when the second state is read.", "La première marche apparaît dès que le deuxième état est relevé.", "Der erste Gang erscheint, sobald der zweite Stand abgelesen ist.")
	ChartEmptyValues  = say1("No movement has {symbol} yet: some of its days are still to be read.", "Aucun mouvement n’a encore {symbol} : des jours restent à relever.", "Noch kein Werk hat {symbol}: Einige seiner Tage sind noch abzulesen.")
	ChartEmptyFails   = say("No movement has failed.", "Aucun mouvement n’a échoué.", "Kein Werk ist durchgefallen.")
	RatesLegend       = say("Solid line within a position, dotted across a turn; hollow points enter no criterion; a cross is a reading since replaced", "Trait plein dans une position, pointillé d’une position à l’autre ; les points creux n’entrent dans aucun critère ; une croix est un relevé remplacé depuis", "Durchgezogen innerhalb einer Lage, gepunktet über einen Lagenwechsel; hohle Punkte gehen in kein Kriterium ein; ein Kreuz ist eine inzwischen ersetzte Ablesung")
)

// PositionTerm is the trade term of a position symbol ("6H"), or the symbol itself when a programme
// has one we have no word for.
func PositionTerm(symbol string) Text {
	switch symbol {
	case "CH":
		return PositionCH
	case "FH":
		return PositionFH
	case "6H":
		return Position6H
	case "3H":
		return Position3H
	case "9H":
		return Position9H
	case "12H":
		return Position12H
	}
	return Raw(symbol)
}

// CriterionTitle is the term of one of the seven classic criteria in the reader's language, known by
// the symbol and title of the built-in programme together. What another programme means by the same
// letter keeps the title that programme gives it.
func CriterionTitle(symbol, title string) Text {
	if t, ok := classic[[2]string{symbol, title}]; ok {
		return t
	}
	return Raw(title)
}

var classic = map[[2]string]Text{
	{"M", "mean daily rate"}:                  MeanDailyRate,
	{"V", "mean variation"}:                   MeanVariation,
	{"Vmax", "greatest variation"}:            GreatestVariation,
	{"D", "vertical minus horizontal"}:        FlatAndHanging,
	{"P", "greatest deviation from the mean"}: GreatestDeviation,
	{"C", "rate variation with temperature"}:  ByTemperature,
	{"R", "rate resumption"}:                  Resumption,
}

// RoleName is the word for a role ("technician").
func RoleName(role string) Text {
	switch role {
	case "technician":
		return RoleTechnician
	case "lead":
		return RoleLead
	case "adjuster":
		return RoleAdjuster
	case "manager":
		return RoleManager
	}
	return Raw(role)
}

// Where a crown at 3 o'clock points.
var (
	CrownLeft  = say("crown left", "couronne à gauche", "Krone links")
	CrownUp    = say("crown up", "couronne en haut", "Krone oben")
	CrownDown  = say("crown down", "couronne en bas", "Krone unten")
	CrownRight = say("crown right", "couronne à droite", "Krone rechts")
)

// Crown says where the crown points in a vertical position, by the code the engine gives ("left");
// nil for a horizontal or unknown one.
func Crown(code string) Text {
	switch code {
	case "left":
		return CrownLeft
	case "up":
		return CrownUp
	case "down":
		return CrownDown
	case "right":
		return CrownRight
	}
	return nil
}

// What a round does.
var (
	MoveThen      = say("then", "puis", "dann")
	MoveStay      = say("stay", "reste", "bleibt")
	MoveEnd       = say("then the trial ends", "puis l’épreuve est finie", "dann endet die Prüfung")
	WithAccessory = say("chrono", "chrono", "Chrono")
)
