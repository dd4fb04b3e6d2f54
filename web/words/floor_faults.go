package words

import (
	"strconv"
	"strings"

	"ratehouse/trial/sheet"
)

// What can be wrong with a form or a reading of the floor pages: what it is, and what would be right.
var _ = []struct{}{
	fault("needed", "This is needed.", "Ce champ est nécessaire.", "Diese Angabe ist nötig."),
	fault("code_form", "{code} cannot be a code: capital letters, digits and . _ - only, a letter or digit first, 40 at most.", "{code} ne peut pas être un code : majuscules, chiffres et . _ - seulement, d’abord une lettre ou un chiffre, 40 au plus.", "{code} kann keine Kennung sein: nur Großbuchstaben, Ziffern und . _ -, zuerst ein Buchstabe oder eine Ziffer, höchstens 40."),
	fault("batch_code_taken", "{code} is in use already.", "{code} est déjà utilisé.", "{code} ist schon vergeben."),
	fault("unknown_programme", "There is no programme {code}. Choose one of the list.", "Il n’y a pas de programme {code}. Choisissez dans la liste.", "Es gibt kein Prüfprogramm {code}. Wählen Sie eines aus der Liste."),
	fault("category_needed", "Choose the category, or a calibre whose card says it.", "Choisissez la catégorie, ou un calibre dont la fiche l’indique.", "Wählen Sie die Kategorie, oder ein Kaliber, dessen Karte sie nennt."),
	fault("category_contradicts_calibre", "Category {category} contradicts the card of calibre {calibre}, which says {card}.", "La catégorie {category} contredit la fiche du calibre {calibre}, qui indique {card}.", "Kategorie {category} widerspricht der Karte des Kalibers {calibre}, die {card} sagt."),
	fault("unknown_category", "The programme has no category {category}.", "Le programme n’a pas de catégorie {category}.", "Das Prüfprogramm hat keine Kategorie {category}."),
	fault("unknown_entry", "Choose what is typed each day: state or rate.", "Choisissez ce qu’on saisit chaque jour : état ou marche.", "Wählen Sie, was täglich eingegeben wird: Stand oder Gang."),
	fault("unknown_holder_type", "There is no holder type {code} that carries movements.", "Il n’y a pas de porte-mouvements {code}.", "Es gibt keinen Werkhalter {code} für Werke."),
	fault("too_many_pieces", "One batch holds {most} movements at most. Register several batches.", "Un lot contient {most} mouvements au plus. Enregistrez plusieurs lots.", "Ein Los hat höchstens {most} Werke. Nehmen Sie mehrere Lose an."),
	fault("serial_empty", "line {line}: the number is missing.", "ligne {line} : le numéro manque.", "Zeile {line}: Die Nummer fehlt."),
	fault("serial_long", "line {line}: a number has {most} characters at most.", "ligne {line} : un numéro a {most} caractères au plus.", "Zeile {line}: Eine Nummer hat höchstens {most} Zeichen."),
	fault("serial_formula", "line {line}: {serial} begins with a sign that a spreadsheet takes for a formula. Write the number as it is engraved.", "ligne {line} : {serial} commence par un signe qu’un tableur prend pour une formule. Écrivez le numéro tel qu’il est gravé.", "Zeile {line}: {serial} beginnt mit einem Zeichen, das eine Tabellenkalkulation für eine Formel hält. Schreiben Sie die Nummer, wie sie graviert ist."),
	fault("serial_unprintable", "line {line}: {serial} holds characters that cannot be seen. Type it again.", "ligne {line} : {serial} contient des caractères invisibles. Ressaisissez-le.", "Zeile {line}: {serial} enthält unsichtbare Zeichen. Tippen Sie sie neu."),
	fault("serial_repeated", "line {line}: {serial} stands on line {first} already.", "ligne {line} : {serial} figure déjà à la ligne {first}.", "Zeile {line}: {serial} steht schon in Zeile {first}."),
	fault("place_repeated", "line {line}: place {place} is taken by line {first}.", "ligne {line} : l’emplacement {place} est pris par la ligne {first}.", "Zeile {line}: Platz {place} ist durch Zeile {first} belegt."),
	fault("place_out_of_range", "line {line}: there is no place {place}; places are counted from 1 over all holders.", "ligne {line} : il n’y a pas d’emplacement {place} ; on compte à partir de 1 sur tous les porte-mouvements.", "Zeile {line}: Es gibt keinen Platz {place}; gezählt wird ab 1 über alle Werkhalter."),
	fault("already_certified", "{serial} holds certificate {certificate} from batch {batch}. The QA lead alone can let it be tested again, with a reason.", "{serial} a le bulletin {certificate} du lot {batch}. Seule la qualité peut le faire contrôler à nouveau, avec une raison.", "{serial} hat den Gangschein {certificate} aus Los {batch}. Nur die QS kann sie mit Begründung noch einmal prüfen lassen."),
	fault("form_unreadable", "The form did not arrive whole. Send it again.", "Le formulaire n’est pas arrivé entier. Renvoyez-le.", "Das Formular kam nicht vollständig an. Senden Sie es noch einmal."),

	fault("unknown_batch", "There is no batch {batch}.", "Il n’y a pas de lot {batch}.", "Es gibt kein Los {batch}."),
	fault("unknown_movement", "There is no movement {serial} in batch {batch}.", "Il n’y a pas de mouvement {serial} dans le lot {batch}.", "Es gibt kein Werk {serial} im Los {batch}."),
	fault("step_or_day", "Either the round or the day must be given.", "Il faut indiquer la tournée ou le jour.", "Entweder Runde oder Tag ist anzugeben."),
	fault("unknown_step", "The batch has no such round.", "Le lot n’a pas cette tournée.", "Das Los hat diese Runde nicht."),
	fault("day_repeated", "Several rounds close this day; name the round.", "Plusieurs tournées closent ce jour ; indiquez la tournée.", "Mehrere Runden schließen diesen Tag; nennen Sie die Runde."),
	fault("ended", "{serial} is out of the trial. No further reading is taken.", "{serial} est hors de l’épreuve. Plus aucun relevé.", "{serial} ist nicht mehr in der Prüfung. Es wird nichts mehr aufgenommen."),
	fault("released", "{serial} has its paper already. A reading can only change after that is revoked.", "{serial} a déjà son document. Un relevé ne change qu’après sa révocation.", "{serial} hat schon sein Papier. Eine Ablesung ändert sich erst, wenn es widerrufen ist."),
	fault("kind", "This kind of reading is not known.", "Ce genre de relevé est inconnu.", "Diese Art der Ablesung ist unbekannt."),
	fault("method", "This method of reading is not known.", "Cette méthode de relevé est inconnue.", "Dieses Ableseverfahren ist unbekannt."),
	fault("method_not_built", "This method of reading is not built yet.", "Cette méthode de relevé n’existe pas encore.", "Dieses Ableseverfahren gibt es noch nicht."),
	fault("no_rate_at_start", "Round 0 begins the trial: there is no rate yet.", "La tournée 0 ouvre l’épreuve : il n’y a pas encore de marche.", "Runde 0 beginnt die Prüfung: Es gibt noch keinen Gang."),
	fault("read_at_missing", "The instant of the reading is missing.", "L’instant du relevé manque.", "Der Zeitpunkt der Ablesung fehlt."),
	fault("read_at_order", "It would lie before the reading of an earlier round or after that of a later one (round {step}). Check the clock of this device.", "Il serait avant un relevé antérieur ou après un relevé ultérieur (tournée {step}). Vérifiez l’horloge de cet appareil.", "Sie läge vor einer früheren oder nach einer späteren Ablesung (Runde {step}). Prüfen Sie die Uhr dieses Geräts."),
	fault("future", "The instant {read_at} lies ahead of the laboratory’s clock ({now}). Check the clock of this device.", "L’instant {read_at} est en avance sur l’horloge du laboratoire ({now}). Vérifiez l’horloge de cet appareil.", "Der Zeitpunkt {read_at} liegt vor der Uhr des Labors ({now}). Prüfen Sie die Uhr dieses Geräts."),
	fault("too_early", "The instant {read_at} lies more than two days before round 0 ({starts_at}). Check the clock of this device.", "L’instant {read_at} précède la tournée 0 ({starts_at}) de plus de deux jours. Vérifiez l’horloge de cet appareil.", "Der Zeitpunkt {read_at} liegt mehr als zwei Tage vor Runde 0 ({starts_at}). Prüfen Sie die Uhr dieses Geräts."),
	fault("unknown_reader", "There is no account {name}.", "Il n’y a pas de compte {name}.", "Es gibt kein Konto {name}."),
	fault("reason_needed", "Say why the value changes.", "Dites pourquoi la valeur change.", "Sagen Sie, warum sich der Wert ändert."),
	fault("base_ahead", "This page is ahead of the laboratory. Load it again.", "Cette page est en avance sur le laboratoire. Rechargez-la.", "Diese Seite ist dem Labor voraus. Laden Sie sie neu."),
	fault("id_reused", "The same entry came twice with different values. Type it again.", "La même saisie est venue deux fois avec des valeurs différentes. Ressaisissez-la.", "Dieselbe Eingabe kam zweimal mit verschiedenen Werten. Geben Sie sie noch einmal ein."),
	fault("id_missing", "The entry came without its number. Load the page again.", "La saisie est venue sans son numéro. Rechargez la page.", "Die Eingabe kam ohne ihre Nummer. Laden Sie die Seite neu."),
	fault("has_states", "This day has its two states already; a rate cannot stand beside them.", "Ce jour a déjà ses deux états ; une marche ne peut s’y ajouter.", "Dieser Tag hat schon seine zwei Stände; ein Gang kann nicht daneben stehen."),
	fault("has_rate", "This day has a typed rate already; a state cannot stand beside it.", "Ce jour a déjà une marche saisie ; un état ne peut s’y ajouter.", "Dieser Tag hat schon einen eingegebenen Gang; ein Stand kann nicht daneben stehen."),
	fault("beyond_600", "{value} would be a rate of more than 600 s/d: no running movement does that. Look at it again; if it stopped or a hand is loose, choose what is seen.", "{value} donnerait plus de 600 s/d : aucun mouvement en marche ne fait cela. Regardez-le encore ; s’il s’est arrêté ou qu’une aiguille est lâche, choisissez ce qu’on voit.", "{value} wäre ein Gang von mehr als 600 s/d: Das macht kein laufendes Werk. Sehen Sie es noch einmal an; wenn es steht oder ein Zeiger lose ist, wählen Sie, was man sieht."),
	fault("beyond_half_dial", "{value} s is more than half a dial of {hours} h. Give the state from the nearer side.", "{value} s dépasse un demi-cadran de {hours} h. Indiquez l’état par le côté le plus proche.", "{value} s ist mehr als ein halbes Zifferblatt von {hours} h. Geben Sie den Stand von der näheren Seite an."),
	fault("confirm_number", "{value} is not a number.", "{value} n’est pas un nombre.", "{value} ist keine Zahl."),
	fault("evidence_form", "The fingerprint of the image is not one.", "L’empreinte de l’image n’en est pas une.", "Der Fingerabdruck des Bildes ist keiner."),
	fault(string(sheet.NotNumber), "{value} is not a number. Type digits with a sign and one point.", "{value} n’est pas un nombre. Saisissez des chiffres avec un signe et une virgule.", "{value} ist keine Zahl. Tippen Sie Ziffern mit Vorzeichen und einem Komma."),
	fault(string(sheet.OtherCharacter), "{value} holds a sign that no number has.", "{value} contient un signe étranger aux nombres.", "{value} enthält ein Zeichen, das keine Zahl hat."),
	fault(string(sheet.Exponent), "{value} has an exponent; write the number out.", "{value} a un exposant ; écrivez le nombre en entier.", "{value} hat einen Exponenten; schreiben Sie die Zahl aus."),
	fault(string(sheet.SignApart), "{value} has its sign apart from its digits.", "{value} a son signe à part.", "{value} hat sein Vorzeichen abgesetzt."),
	fault(string(sheet.TooFine), "{value} is finer than 0.001; nothing is rounded here.", "{value} est plus fin que 0,001 ; rien n’est arrondi ici.", "{value} ist feiner als 0,001; hier wird nichts gerundet."),
	fault(string(sheet.Beyond), "{value} is too great.", "{value} est trop grand.", "{value} ist zu groß."),
	fault(string(sheet.TooLarge), "{value} has far too many digits.", "{value} a beaucoup trop de chiffres.", "{value} hat viel zu viele Stellen."),
	fault(string(sheet.DecimalComma), "{value} has a decimal comma; write a point.", "{value} a une virgule ; écrivez un point.", "{value} hat ein Komma; schreiben Sie einen Punkt."),
	fault(string(sheet.AmbiguousComma), "{value} may mean two things: write it with a point, or with another number of decimals.", "{value} peut se lire de deux façons : écrivez-le avec un point, ou avec un autre nombre de décimales.", "{value} kann zweierlei heißen: Schreiben Sie es mit einem Punkt, oder mit anderer Stellenzahl."),
	fault(string(sheet.Grouping), "{value} has digits in groups; write the number without them.", "{value} a des chiffres groupés ; écrivez le nombre sans séparateurs.", "{value} hat gruppierte Ziffern; schreiben Sie die Zahl ohne."),
	fault(string(sheet.IsFormula), "{value} is a formula; write the number itself.", "{value} est une formule ; écrivez le nombre même.", "{value} ist eine Formel; schreiben Sie die Zahl selbst."),
	fault(string(sheet.Blank), "No value was typed.", "Aucune valeur saisie.", "Es wurde kein Wert eingegeben."),

	fault("no_batch", "There is no batch {code}.", "Il n’y a pas de lot {code}.", "Es gibt kein Los {code}."),
	fault("no_round", "Batch {code} has no round {round}.", "Le lot {code} n’a pas de tournée {round}.", "Los {code} hat keine Runde {round}."),
	fault("no_movement", "There is no movement {serial} in batch {code}.", "Il n’y a pas de mouvement {serial} dans le lot {code}.", "Es gibt kein Werk {serial} im Los {code}."),
	fault("round_not_open", "Round {round} of batch {code} was never opened, so it cannot be closed.", "La tournée {round} du lot {code} n’a jamais été ouverte ; on ne peut la clore.", "Runde {round} von Los {code} wurde nie geöffnet und kann nicht geschlossen werden."),
	fault("round_changed_meanwhile", "Somebody opened or closed this round at the same moment.", "Quelqu’un a ouvert ou clos cette tournée au même instant.", "Jemand hat diese Runde im selben Augenblick geöffnet oder geschlossen."),
	fault("unknown_end", "Say how it leaves.", "Dites comment il sort.", "Sagen Sie, wie es ausscheidet."),
	fault("end_as_is", "{serial} is already as you want it. Load the page again.", "{serial} est déjà dans cet état. Rechargez la page.", "{serial} ist schon so, wie Sie es wollen. Laden Sie die Seite neu."),
	fault("end_changed_meanwhile", "Somebody changed the end of this movement at the same moment.", "Quelqu’un a modifié la fin de ce mouvement au même instant.", "Jemand hat das Ende dieses Werks im selben Augenblick geändert."),
	fault("not_allowed", "Your account has no right to do this.", "Votre compte n’a pas le droit de faire cela.", "Ihr Konto hat kein Recht dazu."),
	fault("reading_changed_meanwhile", "Somebody typed the same place at the same moment. Load the page again.", "Quelqu’un a saisi le même emplacement au même instant. Rechargez la page.", "Jemand hat im selben Augenblick denselben Platz eingegeben. Laden Sie die Seite neu."),
}

// listRefusals are the sentences for a line of a list or file, by code; their arguments are numbered as
// in trial/sheet.
var listRefusals = map[sheet.Code]*entry{}

func line(code sheet.Code, en, fr, de string) struct{} {
	listRefusals[code] = register(-2, one(en, fr, de))
	return struct{}{}
}

var _ = []struct{}{
	line(sheet.NotNumber, "{0} is not a number: digits with an optional sign and at most one point; a day not read is left blank", "{0} n’est pas un nombre : des chiffres, un signe éventuel et un point au plus ; un jour non relevé reste vide", "{0} ist keine Zahl: Ziffern, wenn nötig ein Vorzeichen und höchstens ein Punkt; ein nicht abgelesener Tag bleibt leer"),
	line(sheet.OtherCharacter, "{0} is not a number: {1} is not allowed in one", "{0} n’est pas un nombre : {1} n’y est pas admis", "{0} ist keine Zahl: {1} darf darin nicht stehen"),
	line(sheet.Exponent, "{0} has an exponent; write the number out", "{0} a un exposant ; écrivez le nombre en entier", "{0} hat einen Exponenten; schreiben Sie die Zahl aus"),
	line(sheet.SignApart, "{0} has its sign apart from its digits", "{0} a son signe à part", "{0} hat sein Vorzeichen abgesetzt"),
	line(sheet.TooFine, "{0} is finer than 0.001; nothing is rounded", "{0} est plus fin que 0,001 ; rien n’est arrondi", "{0} ist feiner als 0,001; nichts wird gerundet"),
	line(sheet.Beyond, "{0} is beyond ±{1} {2}", "{0} dépasse ±{1} {2}", "{0} liegt jenseits von ±{1} {2}"),
	line(sheet.DecimalComma, "{0} has a decimal comma, which only files separated by semicolon or tab may use", "{0} a une virgule, admise seulement dans les fichiers séparés par point-virgule ou tabulation", "{0} hat ein Dezimalkomma, das nur in Dateien mit Semikolon oder Tabulator stehen darf"),
	line(sheet.AmbiguousComma, "{0} is ambiguous: its comma may be a decimal comma or a thousands separator", "{0} est ambigu : la virgule peut être décimale ou séparer les milliers", "{0} ist mehrdeutig: Das Komma kann Dezimalkomma oder Tausendertrennung sein"),
	line(sheet.Grouping, "{0} has digits in groups; write the number without separators", "{0} a des chiffres groupés ; écrivez le nombre sans séparateurs", "{0} hat gruppierte Ziffern; schreiben Sie die Zahl ohne Trennzeichen"),
	line(sheet.IsFormula, "{0} is a formula; write the number itself", "{0} est une formule ; écrivez le nombre même", "{0} ist eine Formel; schreiben Sie die Zahl selbst"),
	line(sheet.Blank, "nothing stands here", "il n’y a rien ici", "hier steht nichts"),
	line(sheet.StateBeyond, "a state of {0} s is beyond ±{1} s, half a dial period; give it from the nearer side", "un état de {0} s dépasse ±{1} s, un demi-cadran ; indiquez-le par le côté le plus proche", "ein Stand von {0} s liegt jenseits von ±{1} s, einem halben Zifferblatt; geben Sie ihn von der näheren Seite an"),
	line(sheet.JumpBeyond, "from {0} s the day before to {1} s is a rate beyond ±600 s/d", "de {0} s la veille à {1} s, la marche dépasse ±600 s/d", "von {0} s am Vortag auf {1} s ist ein Gang jenseits von ±600 s/d"),
	line(sheet.CellCount, "the row has {0} cells, the header {1}", "la ligne a {0} cellules, l’en-tête {1}", "die Zeile hat {0} Zellen, die Kopfzeile {1}"),
	line(sheet.OpenQuote, "a quotation mark is still open at the end of the line", "un guillemet reste ouvert en fin de ligne", "ein Anführungszeichen ist am Zeilenende noch offen"),
	line(sheet.StrayQuote, "a quotation mark stands inside the cell {0}; put the cell in quotation marks and double it", "un guillemet se trouve dans la cellule {0} ; mettez la cellule entre guillemets et doublez-le", "in der Zelle {0} steht ein Anführungszeichen; setzen Sie die Zelle in Anführungszeichen und verdoppeln Sie es"),
	line(sheet.BadText, "bytes that are not valid text: {0}", "octets qui ne sont pas du texte : {0}", "Bytes, die kein Text sind: {0}"),
	line(sheet.LongLine, "the line is longer than {0} bytes", "la ligne dépasse {0} octets", "die Zeile ist länger als {0} Bytes"),
	line(sheet.Duplicate, "{0} stands on line {1} already; line {2} repeats it", "{0} figure déjà à la ligne {1} ; la ligne {2} le répète", "{0} steht schon in Zeile {1}; Zeile {2} wiederholt sie"),
	line(sheet.BadCategory, "{0} is not a category of the programme ({1})", "{0} n’est pas une catégorie du programme ({1})", "{0} ist keine Kategorie des Prüfprogramms ({1})"),
	line(sheet.BadStep, "{0} is not a whole number from 0 to {1}", "{0} n’est pas un nombre entier de 0 à {1}", "{0} ist keine ganze Zahl von 0 bis {1}"),
	line(sheet.BadTime, "{0} is not an instant like 2026-01-31T08:05:00Z", "{0} n’est pas un instant comme 2026-01-31T08:05:00Z", "{0} ist kein Zeitpunkt wie 2026-01-31T08:05:00Z"),
	line(sheet.ValueAndCode, "exactly one of value and code must be filled", "il faut remplir soit value, soit code", "genau eines von value und code muss gefüllt sein"),
	line(sheet.BadCode, "{0} is not an observation code ({1})", "{0} n’est pas un code d’observation ({1})", "{0} ist kein Beobachtungszeichen ({1})"),
	line(sheet.EmptyFile, "the list is empty", "la liste est vide", "die Liste ist leer"),
	line(sheet.MissingColumn, "the column is missing", "la colonne manque", "die Spalte fehlt"),
	line(sheet.UnknownColumn, "the column is not known here ({0})", "cette colonne est inconnue ici ({0})", "diese Spalte ist hier unbekannt ({0})"),
	line(sheet.RepeatedColumn, "the column appears twice", "la colonne figure deux fois", "die Spalte kommt zweimal vor"),
	line(sheet.StepAndDay, "a file has either a column step or a column day", "un fichier a soit une colonne step, soit une colonne day", "eine Datei hat entweder eine Spalte step oder eine Spalte day"),
	line(sheet.TooLarge, "{0} has more than 15 digits before the point", "{0} a plus de 15 chiffres avant la virgule", "{0} hat mehr als 15 Stellen vor dem Komma"),
	line("place_number", "{0} is not the number of a place, counted from 1", "{0} n’est pas un numéro d’emplacement, compté à partir de 1", "{0} ist keine Platznummer, gezählt ab 1"),
}

// ListRefusal says why a line of a list was refused, without naming the line.
func ListRefusal(r *sheet.Refusal) Text { return listRefusal{r} }

type listRefusal struct{ *sheet.Refusal }

func (r listRefusal) text(p *Printer) string {
	e := listRefusals[r.Code]
	if e == nil {
		return p.Say(unknownFault.With(string(r.Code)))
	}
	pairs := make([]string, 0, 2*len(r.Args))
	for i, a := range r.Args {
		pairs = append(pairs, "{"+strconv.Itoa(i)+"}", a)
	}
	return strings.NewReplacer(pairs...).Replace(e.forms[p.lang][0])
}
