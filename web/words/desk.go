package words

import "ratehouse/trial"

// The list of batches, and search.
var (
	BatchesSub          = say("Every batch, the latest start first", "Tous les lots, le dernier commencé en premier", "Alle Lose, das zuletzt begonnene zuerst")
	BatchesAll          = say("All batches", "Tous les lots", "Alle Lose")
	BatchesNone         = say("No batch yet", "Aucun lot pour l’instant", "Noch kein Los")
	BatchesNoneText     = say("Batches stand here from their registration on, with their progress and verdicts.", "Les lots figurent ici dès leur enregistrement, avec leur avancement et leurs verdicts.", "Hier stehen Lose, sobald sie angenommen sind, mit ihrem Fortschritt und ihren Urteilen.")
	BatchesNoneLike     = say1("No batch for “{words}”", "Aucun lot pour « {words} »", "Kein Los zu „{words}“")
	BatchesNoneLikeText = say("Looked for in the codes of batches, depositors and calibres. Movement numbers have a field of their own.", "Cherché dans les codes des lots, des déposants et des calibres. Les numéros de mouvement ont leur propre champ.", "Gesucht in den Kennungen von Losen, Auftraggebern und Kalibern. Werknummern haben ein eigenes Feld.")
	FilterBatches       = say("Batch, depositor or calibre", "Lot, déposant ou calibre", "Los, Auftraggeber oder Kaliber")
	FindNumber          = say("Movement number or batch", "Numéro de mouvement ou lot", "Werknummer oder Los")
	TrialDayHead        = say("Trial day", "Jour d’épreuve", "Prüftag")
	NextRoundHead       = say("Where it stands", "Où il en est", "Wo es steht")
	YieldHead           = say("Yield", "Taux de réussite", "Ausbeute").unsure(FR, DE)
	OpenRemarksHead     = say("Open remarks", "Observations ouvertes", "Offene Bemerkungen")
	BatchStateWaiting   = say("waiting", "en attente", "wartet")
	BatchStateDone      = say("done", "terminé", "fertig")
	RoundDueAt          = say3("round {k} due {day}, {time}", "tournée {k} à faire {day}, {time}", "Runde {k} fällig {day}, {time}").unsure(FR, DE)
	RoundLate           = say2("round {k} {late}", "tournée {k} {late}", "Runde {k} {late}").unsure(FR, DE)
	OfJudged            = say2("{pass} of {judged} judged", "{pass} sur {judged} jugés", "{pass} von {judged} beurteilten")
	YieldMeans          = say("Yield: passed of passed and failed, first presentations alone. Rejected and removed count as failed; withdrawn and void stand outside.", "Taux de réussite : réussis sur réussis et échoués, premières présentations seulement. Refusés et sortis comptent comme échoués ; retirés et annulés n’y entrent pas.", "Ausbeute: bestandene von bestandenen und nicht bestandenen, nur Erstprüfungen. Zurückgewiesene und herausgenommene zählen als nicht bestanden; zurückgezogene und ungültige bleiben außerhalb.").unsure(FR, DE)
	EarlierBatches      = say("Earlier batches", "Lots plus anciens", "Frühere Lose")
	NoCalibre           = say("no calibre given", "sans calibre", "ohne Kaliber")
	OfCalibre           = say1("calibre {code}", "calibre {code}", "Kaliber {code}")
	CalibreFor          = say2("{calibre}, for {depositor}", "{calibre}, pour {depositor}", "{calibre}, für {depositor}")

	SearchTitle   = say("Search", "Recherche", "Suche")
	SearchFor     = say1("for “{words}”", "pour « {words} »", "nach „{words}“")
	SearchEmpty   = say("Type a number", "Saisissez un numéro", "Geben Sie eine Nummer ein")
	SearchNothing = say1("Nothing for “{words}”", "Rien pour « {words} »", "Nichts zu „{words}“")
	SearchHow     = say("A movement is found by the beginning of its number or by its last digits, a batch by any part of its code.", "Un mouvement se trouve par le début de son numéro ou par ses derniers chiffres, un lot par une partie de son code.", "Ein Werk findet sich über den Anfang seiner Nummer oder ihre letzten Ziffern, ein Los über einen Teil seiner Kennung.")
	SearchMore    = say("There are more: type more digits", "Il y en a d’autres : saisissez plus de chiffres", "Es gibt mehr: Geben Sie mehr Ziffern ein")
)

// The batch page.
var (
	BatchSub         = say3("{movements}, {which}, category {category}", "{movements}, {which}, catégorie {category}", "{movements}, {which}, Kategorie {category}")
	ValuesAsCSV      = say("Values as CSV", "Valeurs en CSV", "Werte als CSV")
	ReleaseAct       = say("Release", "Émettre", "Freigeben").unsure(FR)
	ReleaseNothing   = say("Nothing to release yet: release begins when the last round is done.", "Rien à émettre pour l’instant : l’émission commence après la dernière tournée.", "Noch nichts freizugeben: Die Freigabe beginnt, wenn die letzte Runde erledigt ist.")
	TrialFinished    = say("finished", "terminée", "beendet")
	TrialWaiting     = say("not begun", "pas commencée", "nicht begonnen")
	DayAndReading    = say3("{day}, round {k}: {read}", "{day}, tournée {k} : {read}", "{day}, Runde {k}: {read}").unsure(FR, DE)
	NextReading      = say("Next reading", "Prochain relevé", "Nächste Ablesung")
	WithinTolerance  = say3("{day}, {time} ± {tolerance}", "{day}, {time} ± {tolerance}", "{day}, {time} ± {tolerance}")
	ProgrammeVersion = say2("{title}, version {version}", "{title}, version {version}", "{title}, Fassung {version}")
	Where            = say("Where", "Où", "Wo")
	NoHolder         = say("in no holder", "dans aucun porte-mouvements", "in keinem Werkhalter").unsure(FR, DE)
	HoldersFromTo    = say3("{n} holders, {first} to {last}", "{n} porte-mouvements, {first} à {last}", "{n} Werkhalter, {first} bis {last}").unsure(FR, DE)
	HolderAndPlace   = say2("{holder}, place {n}", "{holder}, emplacement {n}", "{holder}, Platz {n}")
	DecisionRule     = say("Decision", "Décision", "Entscheidung")
	DecisionSimple   = say("simple, limits inclusive", "simple, limites comprises", "einfach, Grenzwerte eingeschlossen")
	DecisionGuarded  = say("limits drawn in by a guard band", "limites resserrées d’une marge", "Grenzwerte um ein Schutzband enger").unsure(FR, DE)
	ReadingRounds    = say("Reading rounds", "Tournées de relevés", "Ableserunden").unsure(FR, DE)
	RoundSays        = say2("Round {k}: {read}", "Tournée {k} : {read}", "Runde {k}: {read}").unsure(FR, DE)

	YieldTitle      = say("Yield", "Taux de réussite", "Ausbeute").unsure(FR, DE)
	YieldNoLimits   = say("This category has no limits: there are values, and no verdicts.", "Cette catégorie n’a pas de limites : des valeurs, et pas de verdicts.", "Diese Kategorie hat keine Grenzwerte: Es gibt Werte und keine Urteile.")
	NoVerdictBefore = say1("No verdict before day {n}: every criterion still lacks a day.", "Pas de verdict avant le jour {n} : il manque encore un jour à chaque critère.", "Kein Urteil vor Tag {n}: Jedem Kriterium fehlt noch ein Tag.")
	NothingJudged   = say("No movement has passed or failed.", "Aucun mouvement n’a réussi ni échoué.", "Kein Werk hat bestanden oder nicht bestanden.")
	YieldAgain      = say2("After re-submission: {pass} of {judged} pass.", "Après nouvelle présentation : {pass} sur {judged} réussis.", "Nach Wiedereinsendung: {pass} von {judged} bestanden.").unsure(FR, DE)
	WhyFail         = say("Why movements fail", "Pourquoi des mouvements échouent", "Warum Werke nicht bestehen")
	ParetoRejected  = say("rejected for cause", "refusé pour cause", "aus Grund zurückgewiesen")
	ParetoRemoved   = say("removed, could not pass", "sorti, éliminé", "herausgenommen, ausgeschieden").unsure(FR, DE)
	DistributionOf  = say1("Distribution of {symbol}", "Répartition de {symbol}", "Verteilung von {symbol}")
	MeasuredOn      = say2("measured on {n} of {all}", "mesuré sur {n} de {all}", "gemessen an {n} von {all}")
	MeanSoFar       = say("Mean rate so far", "Marche moyenne jusqu’ici", "Mittlerer Gang bisher")
	MeanSoFarOf     = say2("up to {days}, {movements}; decides nothing yet", "jusqu’à {days}, {movements} ; ne décide encore rien", "bis zu {days}, {movements}; entscheidet noch nichts")
	OtherCriteria   = say("Draw another criterion", "Dessiner un autre critère", "Ein anderes Kriterium zeichnen")

	RiskTitle          = say("Cannot pass, or at risk", "Éliminés ou menacés", "Ausgeschieden oder gefährdet")
	RiskLead           = say1("at risk: could no longer pass if day {n} were like its mean so far", "menacé : éliminé si le jour {n} ressemblait à sa moyenne jusqu’ici", "gefährdet: Wäre Tag {n} wie das Mittel bisher, schiede es aus")
	CannotLead         = say("no rates to come can satisfy all criteria together", "aucune marche à venir ne satisfait tous les critères ensemble", "keine künftigen Gänge erfüllen alle Kriterien zusammen")
	RiskNone           = say("Every open movement can still pass, and none is at risk.", "Chaque mouvement en cours peut encore réussir, et aucun n’est menacé.", "Jedes offene Werk kann noch bestehen, und keines ist gefährdet.")
	AtRisk             = say("at risk", "menacé", "gefährdet")
	Standing           = say("Standing", "Situation", "Status")
	MeanSoFarShort     = say("so far", "jusqu’ici", "bisher")
	MeanSoFarHead      = say("Mean so far, s/d", "Moyenne jusqu’ici, s/d", "Mittel bisher, s/d")
	OutOfReachHead     = say("Out of reach", "Hors d’atteinte", "Nicht mehr erreichbar")
	OutOfReachTogether = say("all criteria together", "tous les critères ensemble", "alle Kriterien zusammen")
	DayMustBe          = say1("Day {n} must be, s/d", "Le jour {n} doit être, s/d", "Tag {n} muss sein, s/d")
	NoValueHelps       = say("no value helps", "aucune valeur n’aide", "kein Wert hilft")
	InTheTable         = say("in the table", "dans le tableau", "in der Tabelle")

	EndedTitle  = say("Out of the trial", "Hors de l’épreuve", "Nicht mehr in der Prüfung")
	InTrial     = say("in trial", "à l’épreuve", "in Prüfung")
	TakenOut    = say("taken out", "sorti", "herausgenommen")
	EndSeenWhen = say2("{seen}; {when}", "{seen} ; {when}", "{seen}; {when}")

	MovementsTitle  = say("Movements", "Mouvements", "Werke")
	FilterMovements = say("Choose movements", "Choisir des mouvements", "Werke auswählen")
	OutsideLimitsOf = say("Outside limits in", "Hors limites en", "Außerhalb in")
	AnyCriterion    = say("any or none", "un ou aucun", "beliebig")
	FilterText      = say("Number, holder or cause", "Numéro, porte-mouvements ou cause", "Nummer, Halter oder Grund").unsure(FR, DE)
	WithCount       = say2("{what} ({n})", "{what} ({n})", "{what} ({n})")
	CountAndWord    = say2("{n} {what}", "{n} {what}", "{n} {what}")
	ShowAll         = say("show all", "tout afficher", "alle zeigen")
	MatchingOf      = say2("{n} of {all} movements", "{n} mouvements sur {all}", "{n} von {all} Werken")
	RowsOf          = say3("{from} to {until} of {all} movements", "{from} à {until} sur {all} mouvements", "{from} bis {until} von {all} Werken")
	RowsOfMatching  = say4("{from} to {until} of {n} chosen, {all} in all", "{from} à {until} sur {n} choisis, {all} en tout", "{from} bis {until} von {n} gewählten, {all} insgesamt")
	NoneMatch       = say("No movement matches", "Aucun mouvement ne correspond", "Kein Werk passt dazu")
	NoneMatchText   = say("The choice above leaves none. Take one of its conditions away.", "Le choix ci-dessus n’en laisse aucun. Retirez une condition.", "Die Auswahl oben lässt keines übrig. Nehmen Sie eine Bedingung weg.")
	LimitsRow       = say("Limits", "Limites", "Grenzwerte")
	NotesHead       = say("Notes", "Notes", "Anmerkungen")
	AttemptNumber   = say1("presentation {n}", "présentation {n}", "Vorlage {n}").unsure(FR, DE)
	Corrections     = plural("{n} correction", "{n} corrections", "{n} correction", "{n} corrections", "{n} Berichtigung", "{n} Berichtigungen")
	RemarksCount    = plural("{n} remark", "{n} remarks", "{n} observation", "{n} observations", "{n} Bemerkung", "{n} Bemerkungen")
	RoundsRead      = say2("{n} of {all} rounds", "{n} tournées sur {all}", "{n} von {all} Runden").unsure(FR, DE)

	RemarksTitle         = say("Remarks", "Observations", "Bemerkungen")
	RemarksNone          = say("Nothing was remarked.", "Rien n’a été observé.", "Es wurde nichts bemerkt.")
	RemarkOn             = say("Movement number (may stay empty)", "Numéro de mouvement (facultatif)", "Werknummer (darf leer bleiben)")
	RemarkOnHint         = say("Empty: the remark is about the whole batch.", "Vide : l’observation porte sur tout le lot.", "Leer: Die Bemerkung gilt dem ganzen Los.")
	RemarkHoldsHint      = say("An open remark on a movement holds its release.", "Une observation ouverte sur un mouvement retient son émission.", "Eine offene Bemerkung zu einem Werk hält seine Freigabe auf.")
	RemarkAbout          = say3("{when}, {who}; {state}", "{when}, {who} ; {state}", "{when}, {who}; {state}")
	RemarkAtRound        = say2("round {k}; {about}", "tournée {k} ; {about}", "Runde {k}; {about}").unsure(FR, DE)
	RemarkOpen           = say("open", "ouverte", "offen")
	RemarkAssessed       = say("assessed", "évaluée", "bewertet")
	RemarkClosed         = say("closed", "close", "geschlossen")
	RemarkDecide         = say("Decide", "Décider", "Entscheiden")
	RemarkBecomes        = say("What becomes of it", "Ce qu’elle devient", "Was aus ihr wird")
	RemarkAssessedOption = say("assessed: its effect is known, something is still to be done", "évaluée : son effet est connu, il reste à faire", "bewertet: Ihre Wirkung ist bekannt, etwas ist noch zu tun")
	RemarkClosedOption   = say("closed: nothing more is to be done", "close : il n’y a plus rien à faire", "geschlossen: Es ist nichts mehr zu tun")
	RemarkEffect         = say("Effect and decision", "Effet et décision", "Wirkung und Entscheidung")
	RemarkEffectHint     = say("What it means for the results, and what was decided. Whoever decides here does not release the movement.", "Ce que cela signifie pour les résultats, et ce qui est décidé. Qui décide ici n’émet pas le document du mouvement.", "Was es für die Ergebnisse bedeutet und was entschieden wurde. Wer hier entscheidet, gibt das Werk nicht frei.")
	RemarkDecideSave     = say("Save the decision", "Enregistrer la décision", "Entscheidung speichern")

	StraysTitle = say("Refused readings", "Relevés refusés", "Abgelehnte Ablesungen")
	StraysLead  = say("kept as they came; none of them counts", "gardés tels quels ; aucun ne compte", "behalten, wie sie kamen; keine zählt")
	StraysCount = plural("{n} refused", "{n} refused", "{n} refusé", "{n} refusés", "{n} abgelehnt", "{n} abgelehnt")

	ReleaseCertificates = plural("Release {n} certificate", "Release {n} certificates", "Émettre {n} bulletin", "Émettre {n} bulletins", "{n} Gangschein freigeben", "{n} Gangscheine freigeben").unsure(FR)
	ReleaseReports      = plural("Release {n} report", "Release {n} reports", "Émettre {n} avis", "Émettre {n} avis", "{n} Prüfbericht freigeben", "{n} Prüfberichte freigeben").unsure(FR)
	FailedCount         = plural("{n} failed; one may fail in several", "{n} failed; one may fail in several", "{n} échoué ; un mouvement peut échouer sur plusieurs", "{n} échoués ; un mouvement peut échouer sur plusieurs", "{n} nicht bestanden; eines kann an mehreren scheitern", "{n} nicht bestanden; eines kann an mehreren scheitern")
)

// The rate sheet.
var (
	RateSheet         = say("Rate sheet", "Feuille de marche", "Gangblatt").unsure(FR, DE)
	MovementSub       = say3("{which}, category {category}; {where}", "{which}, catégorie {category} ; {where}", "{which}, Kategorie {category}; {where}")
	Presentation      = say("Presentation", "Présentation", "Vorlage").unsure(FR, DE)
	FirstPresentation = say("first presentation", "première présentation", "Erstprüfung").unsure(FR)
	TrialFromTo       = say("Trial", "Épreuve", "Prüfung")
	DateToDate        = say2("{from} to {until}", "{from} à {until}", "{from} bis {until}")
	DailyRate         = say("Daily rate", "Marche diurne", "Täglicher Gang")
	CannotFor         = say1("Cannot pass: no rates to come bring {criteria} inside.", "Éliminé : aucune marche à venir ne ramène {criteria} dans les limites.", "Ausgeschieden: Keine künftigen Gänge bringen {criteria} zurück.")
	CannotTogether    = say("Cannot pass: no rates to come satisfy all criteria together.", "Éliminé : aucune marche à venir ne satisfait tous les critères ensemble.", "Ausgeschieden: Keine künftigen Gänge erfüllen alle Kriterien zusammen.")
	DayNeeded         = say2("Can still pass with day {n} within {interval}, and with no other.", "Peut encore réussir avec le jour {n} dans {interval}, et pas autrement.", "Kann noch bestehen, wenn Tag {n} in {interval} liegt, sonst nicht.")

	ReadingsTitle    = say("Readings", "Relevés", "Ablesungen")
	ReadingsLead     = say("State is indicated less reference time; both figures of a correction stay", "L’état est l’heure indiquée moins l’heure de référence ; les deux chiffres d’une correction restent", "Stand ist angezeigte weniger Referenzzeit; beide Zahlen einer Berichtigung bleiben")
	ReadingsNoValues = say("Values are not shown to who is reading", "Les valeurs ne sont pas montrées à qui relève", "Wer abliest, sieht keine Werte")
	RoundHead        = say("Round", "Tournée", "Runde").unsure(FR, DE)
	PositionUntil    = say("Position until reading", "Position jusqu’au relevé", "Lage bis zur Ablesung")
	ReadAtHead       = say("Read at", "Relevé le", "Abgelesen am")
	SeenHead         = say("Seen", "Constaté", "Gesehen")
	StateHead        = say("State, s", "État, s", "Stand, s")
	RateHead         = say("Rate, s/d", "Marche, s/d", "Gang, s/d")
	StartOfTrial     = say("start", "début", "Beginn")
	IdleDay          = say("serves no day", "ne sert aucun jour", "dient keinem Tag")
	EntersNone       = say("enters no criterion", "n’entre dans aucun critère", "geht in kein Kriterium ein")
	NoteLeft         = say("as left after setting", "après mise à l’heure", "nach dem Stellen").unsure(FR, DE)
	NoteReplicate    = say("second reader", "second lecteur", "zweiter Ableser").unsure(FR, DE)
	NoteLateCheck    = say("read again later", "relu plus tard", "später nachgelesen")
	NoteReplaced     = say2("replaced {when}: {reason}", "remplacé le {when} : {reason}", "ersetzt {when}: {reason}")
	NoteCorrection   = say1("correction: {reason}", "correction : {reason}", "Berichtigung: {reason}")
	ReasonAtEntry    = say("at entry", "à la saisie", "bei der Eingabe")
	NoteSecondLook   = say1("asked for again; typed: {values}", "redemandé ; saisi : {values}", "noch einmal verlangt; getippt: {values}")
	NoteEnteredBy    = say1("entered by {name}", "saisi par {name}", "eingegeben von {name}")
	NoteStation      = say1("station {code}", "poste {code}", "Station {code}")

	CorrectReading     = say("Correct a reading", "Corriger un relevé", "Ablesung berichtigen")
	CorrectShort       = say("Correct", "Corriger", "Berichtigen")
	CorrectRound       = say1("Correct the reading of round {k}", "Corriger le relevé de la tournée {k}", "Ablesung der Runde {k} berichtigen").unsure(FR, DE)
	CorrectWhich       = say("Reading", "Relevé", "Ablesung")
	CorrectWhichNeeded = say("Choose the reading. It may have changed since the page was opened: what stands now is in the list.", "Choisissez le relevé. Il a pu changer depuis l’ouverture de la page : la liste montre ce qui est là maintenant.", "Wählen Sie die Ablesung. Sie kann sich geändert haben, seit die Seite offen ist: In der Liste steht, was jetzt gilt.")
	CorrectValue       = say("Value that is right", "Valeur juste", "Richtiger Wert")
	CorrectValueHint   = say("With its sign. Nothing is rounded.", "Avec son signe. Rien n’est arrondi.", "Mit Vorzeichen. Nichts wird gerundet.")
	CorrectValueNeeded = say("Type the value that is right.", "Saisissez la valeur juste.", "Geben Sie den richtigen Wert ein.")
	CorrectReasonHint  = say("It stands on the rate sheet and in the journal, beside both figures.", "Elle figure sur la feuille de marche et au journal, avec les deux chiffres.", "Er steht auf dem Gangblatt und im Journal, neben beiden Zahlen.").unsure(FR, DE)
	CorrectReadAt      = say("Read at (may stay empty)", "Relevé le (facultatif)", "Abgelesen am (darf leer bleiben)")
	CorrectReadAtHint  = say("Only if it was read again: 2026-12-01 08:30. Empty keeps the instant of the first reading.", "Seulement s’il a été relu : 2026-12-01 08:30. Vide garde l’instant du premier relevé.", "Nur wenn noch einmal abgelesen wurde: 2026-12-01 08:30. Leer behält den Zeitpunkt der ersten Ablesung.")
	CorrectSave        = say("Save the correction", "Enregistrer la correction", "Berichtigung speichern")
	CorrectAgain       = say("Value, once more", "Valeur, encore une fois", "Wert, noch einmal")
	CorrectAgainTitle  = say("Read it again", "Relisez-le", "Noch einmal ablesen")
	CorrectAgainText   = say("Look at the image or the movement once more and type what you see there. Nothing is saved yet.", "Regardez encore une fois l’image ou le mouvement et saisissez ce que vous y voyez. Rien n’est encore enregistré.", "Sehen Sie das Bild oder das Werk noch einmal an und geben Sie ein, was Sie dort sehen. Noch ist nichts gespeichert.")
	CorrectConflict    = say3("{name} changed it meanwhile to {value}, read {when}. Load the page again and decide which one stands.", "{name} l’a changé entre-temps en {value}, relevé le {when}. Rechargez la page et décidez laquelle reste.", "{name} hat inzwischen {value} eingetragen, abgelesen {when}. Laden Sie die Seite neu und entscheiden Sie, was gilt.")
	CellState          = say2("round {k}, state {value}", "tournée {k}, état {value}", "Runde {k}, Stand {value}").unsure(FR, DE)
	CellRate           = say2("round {k}, rate {value}", "tournée {k}, marche {value}", "Runde {k}, Gang {value}").unsure(FR, DE)
	CellLeft           = say2("round {k}, as left {value}", "tournée {k}, après mise à l’heure {value}", "Runde {k}, nach dem Stellen {value}").unsure(FR, DE)

	EndHistory     = say("How it left the trial", "Comment il est sorti de l’épreuve", "Wie es aus der Prüfung ausschied")
	EndTakenBack   = say("end taken back", "fin annulée", "Ende zurückgenommen")
	EndRemovedAs   = say("removed because it cannot pass. Counts as failed.", "sorti parce qu’il est éliminé. Compte comme échoué.", "herausgenommen, weil es ausgeschieden ist. Zählt als nicht bestanden.").unsure(FR, DE)
	EndCauseNeeded = say("Say why in a few words: it stands on the rate sheet and in the report.", "Dites pourquoi en quelques mots : cela figure sur la feuille de marche et dans l’avis.", "Sagen Sie in wenigen Worten, warum: Es steht auf dem Gangblatt und im Bericht.").unsure(FR, DE)
)

// Needed shows the interval in which a coming rate must lie, drawn inwards to as many decimals as are
// typed, so that every value shown is one that serves.
func (p *Printer) Needed(lo, hi trial.Exact) string {
	for places := 1; places <= 6; places++ {
		unit := trial.Ratio(1, pow10(places))
		from, to := atDecimal(lo, places), atDecimal(hi, places)
		if from.Cmp(lo) < 0 {
			from = from.Add(unit)
		}
		if to.Cmp(hi) > 0 {
			to = to.Sub(unit)
		}
		if from.Cmp(to) <= 0 {
			return p.Interval(from.Decimal(places), to.Decimal(places), places, true)
		}
	}
	return p.Interval(lo.Decimal(6), hi.Decimal(6), 6, true)
}

// atDecimal is the number as it prints with so many decimals.
func atDecimal(e trial.Exact, places int) trial.Exact {
	shown, err := trial.ParseExact(e.Decimal(places))
	if err != nil {
		return e
	}
	return shown
}

func pow10(n int) int64 {
	out := int64(1)
	for range n {
		out *= 10
	}
	return out
}
