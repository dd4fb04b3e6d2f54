package words

// Certificates and reports: everything a paper says. A paper is printed from its frozen record, in the
// language of the record, so nothing here may turn on what the laboratory says today.
var (
	PaperCertificate = say("Rate certificate", "Bulletin de marche", "Gangschein")
	PaperTestReport  = say("Test report", "Rapport d’essai", "Prüfbericht")
	PaperRejection   = say("Report of a trial not passed", "Rapport d’épreuve non réussie", "Bericht: Prüfung nicht bestanden").unsure(FR, DE)
	PaperNumber      = say("Number", "Numéro", "Nummer")
	PaperIssued      = say1("issued {date}", "établi le {date}", "ausgestellt am {date}")
	PaperReplaces    = say2("Replaces {number}, which was taken back: {reason}.", "Remplace {number}, retiré : {reason}.", "Ersetzt {number}, das zurückgenommen wurde: {reason}.")
	PaperNamed       = say2("{title} {number}", "{title} {number}", "{title} {number}")

	PaperPass     = say("Pass.", "Réussi.", "Bestanden.")
	PaperFail     = say("Not passed.", "Non réussi.", "Nicht bestanden.")
	PaperMet      = plural("This movement met the {n} criterion of category {category}.", "This movement met all {n} criteria of category {category}.", "Ce mouvement satisfait au {n} critère de la catégorie {category}.", "Ce mouvement satisfait aux {n} critères de la catégorie {category}.", "Dieses Werk erfüllt das {n} Kriterium der Kategorie {category}.", "Dieses Werk erfüllt alle {n} Kriterien der Kategorie {category}.")
	PaperUnmet    = plural("{n} of {all} criteria of category {category} is outside its limits: {list}.", "{n} of {all} criteria of category {category} are outside their limits: {list}.", "{n} des {all} critères de la catégorie {category} est hors limites : {list}.", "{n} des {all} critères de la catégorie {category} sont hors limites : {list}.", "{n} von {all} Kriterien der Kategorie {category} liegt außerhalb der Grenzwerte: {list}.", "{n} von {all} Kriterien der Kategorie {category} liegen außerhalb der Grenzwerte: {list}.")
	PaperUnmetOne = say3("{symbol} {value} ({limits})", "{symbol} {value} ({limits})", "{symbol} {value} ({limits})")
	PaperTrial    = say3("Trial of {days} in {positions}, at {temperatures}.", "Épreuve de {days} en {positions}, à {temperatures}.", "Prüfung über {days} in {positions}, bei {temperatures}.")
	PaperRejected = say1("Rejected for cause: {cause}.", "Refusé pour cause : {cause}.", "Mit Grund zurückgewiesen: {cause}.")
	PaperRemoved  = say1("Removed from the trial because it could no longer pass: {cause}.", "Sorti de l’épreuve parce qu’il ne pouvait plus réussir : {cause}.", "Aus der Prüfung genommen, weil es nicht mehr bestehen konnte: {cause}.")
	PaperOpen     = say1("Not decided, because days were not read: {list}.", "Non décidé, faute de relevés : {list}.", "Nicht entschieden, weil Tage nicht abgelesen wurden: {list}.")

	PaperPositions = plural("{n} position", "{n} positions", "{n} position", "{n} positions", "{n} Lage", "{n} Lagen")
	PaperAnd       = say2("{list} and {last}", "{list} et {last}", "{list} und {last}")

	PaperSize       = say("Category, size", "Catégorie, taille", "Kategorie, Größe")
	PaperDiameter   = say1("diameter {size}", "diamètre {size}", "Durchmesser {size}")
	PaperArea       = say1("area {size}", "surface {size}", "Fläche {size}")
	PaperReceived   = say("Received", "Reçu", "Eingegangen")
	PaperNotNoted   = say("not recorded", "non enregistré", "nicht erfasst")
	PaperNote       = say1("delivery note {number}", "bulletin de livraison {number}", "Lieferschein {number}")
	PaperOrder      = say1("order {number}", "commande {number}", "Auftrag {number}")
	PaperSpan       = say("Trial", "Épreuve", "Prüfung")
	PaperFromTo     = say2("{from} to {to}", "du {from} au {to}", "{from} bis {to}")
	PaperPresented  = say("Presentation, batch", "Présentation, lot", "Vorlage, Los")
	PaperFirst      = say("first", "première", "erste")
	PaperNth        = say1("number {n}", "numéro {n}", "Nummer {n}")
	PaperState      = say("State of the piece", "État de la pièce", "Zustand des Stücks")
	PaperAsReceived = say("as received", "tel que reçu", "wie eingegangen")
	PaperUncased    = say("uncased", "sans boîte", "ohne Gehäuse")
	PaperAutoIn     = say("automatic device fitted", "dispositif automatique monté", "Selbstaufzug eingebaut")
	PaperAutoOut    = say("automatic device taken out", "dispositif automatique démonté", "Selbstaufzug ausgebaut")

	PaperCriteria = say("Criteria", "Critères", "Kriterien")
	PaperPerUnit  = say1("in {unit}", "en {unit}", "in {unit}")
	PaperDefined  = say("daily rates in s/d, positive = gaining", "marches diurnes en s/d, positif = avance", "tägliche Gänge in s/d, positiv = geht vor")
	PaperAccept   = say1("accepted within {limits}", "accepté entre {limits}", "angenommen innerhalb {limits}")

	PaperRates     = say("Daily rates, s/d (positive = gaining)", "Marches diurnes, s/d (positif = avance)", "Tägliche Gänge, s/d (positiv = geht vor)")
	PaperCelsius   = say("Temperature, °C", "Température, °C", "Temperatur, °C")
	PaperRate      = say("Rate, s/d", "Marche, s/d", "Gang, s/d")
	PaperStates    = say("State, s", "État, s", "Stand, s")
	PaperReadOn    = say("Read", "Relevé", "Abgelesen")
	PaperSymbol    = say2("{symbol}: {term}", "{symbol} : {term}", "{symbol}: {term}")
	PaperUnused    = say1("Days in grey ({days}) enter no criterion.", "Les jours en gris ({days}) n’entrent dans aucun critère.", "Graue Tage ({days}) gehen in kein Kriterium ein.")
	PaperUnusedOne = say1("Day {days}, in grey, enters no criterion.", "Le jour {days}, en gris, n’entre dans aucun critère.", "Tag {days}, grau, geht in kein Kriterium ein.")
	PaperAccessory = say1("Additional mechanism running, where there is one: day {days}.", "Mécanisme additionnel enclenché, s’il y en a un : jour {days}.", "Zusatzmechanismus läuft, wo es einen gibt: Tag {days}.")

	PaperMethod      = say("Method and statements", "Méthode et déclarations", "Verfahren und Aussagen")
	PaperProgramme   = say("Programme", "Programme", "Prüfprogramm")
	PaperVersion     = say2("{title}, version {version}", "{title}, version {version}", "{title}, Version {version}")
	PaperUnnamed     = plural("Trial of {n} day", "Trial of {n} days", "Épreuve de {n} jour", "Épreuve de {n} jours", "Prüfung über {n} Tag", "Prüfung über {n} Tage")
	PaperPublished   = say("After published descriptions of the procedure; the text of a standard was not compared.", "D’après des descriptions publiées de la procédure ; le texte d’une norme n’a pas été comparé.", "Nach veröffentlichten Beschreibungen des Verfahrens; mit dem Text einer Norm wurde nicht verglichen.")
	PaperCompared    = say3("Compared with {edition} by {name} on {date}.", "Comparé avec {edition} par {name} le {date}.", "Verglichen mit {edition} von {name} am {date}.")
	PaperHash        = say1("The programme to the letter, SHA-256: {hash}", "Le programme à la lettre, SHA-256 : {hash}", "Das Prüfprogramm im Wortlaut, SHA-256: {hash}")
	PaperMeasurand   = say("Measured", "Mesuré", "Gemessen")
	PaperAsPerformed = say("Daily rates as performed: temperatures within their tolerance belong to the method.", "Marches diurnes telles qu’exécutées : une température dans sa tolérance fait partie de la méthode.", "Tägliche Gänge wie durchgeführt: Temperaturen innerhalb ihrer Toleranz gehören zum Verfahren.")
	PaperAtNominal   = say("Daily rates at exactly the nominal temperatures.", "Marches diurnes aux températures nominales exactes.", "Tägliche Gänge bei genau den Nenntemperaturen.")
	PaperDecision    = say("Decision", "Décision", "Entscheidung")
	PaperSimple      = say("Simple acceptance: each unrounded value is compared with its limits, which belong to the permitted range; no allowance for uncertainty. Printed values are rounded.", "Acceptation simple : chaque valeur non arrondie est comparée à ses limites, qui font partie de l’intervalle admis ; aucune marge pour l’incertitude. Les valeurs imprimées sont arrondies.", "Einfache Annahme: Jeder ungerundete Wert wird mit seinen Grenzwerten verglichen, die zum zulässigen Bereich gehören; ohne Abzug für die Unsicherheit. Gedruckte Werte sind gerundet.")
	PaperGuarded     = say1("Guarded acceptance: limits drawn in by {guard} times the expanded uncertainty; each unrounded value is compared with them. Printed values are rounded.", "Acceptation avec bande de garde : limites resserrées de {guard} fois l’incertitude élargie ; chaque valeur non arrondie leur est comparée. Les valeurs imprimées sont arrondies.", "Annahme mit Schutzabstand: Grenzwerte um das {guard}-fache der erweiterten Unsicherheit eingezogen; jeder ungerundete Wert wird damit verglichen. Gedruckte Werte sind gerundet.")
	PaperUncertainty = say("Uncertainty", "Incertitude", "Unsicherheit")
	PaperNoU         = say("Not stated: the laboratory has stated no uncertainty budget.", "Non indiquée : le laboratoire n’a pas indiqué de bilan d’incertitude.", "Nicht angegeben: Das Labor hat kein Unsicherheitsbudget angegeben.")
	PaperU           = say3("Expanded, k = {k}: one daily rate {rate}; {list}.", "Élargie, k = {k} : une marche diurne {rate} ; {list}.", "Erweitert, k = {k}: ein täglicher Gang {rate}; {list}.")
	PaperUOther      = say1("{list}: no interval applies, see the decision rule.", "{list} : pas d’intervalle applicable, voir la règle de décision.", "{list}: kein Intervall anwendbar, siehe Entscheidungsregel.")
	PaperReference   = say("Reference", "Référence", "Bezug")
	PaperNoReference = say("Not stated by the laboratory.", "Non indiquée par le laboratoire.", "Vom Labor nicht angegeben.")
	PaperConditions  = say("Conditions", "Conditions", "Bedingungen")
	PaperNominal     = say("Positions and temperatures are those of the programme; what the chambers measured is not part of this paper.", "Positions et températures sont celles du programme ; les mesures des enceintes ne font pas partie de ce document.", "Lagen und Temperaturen sind die des Prüfprogramms; was die Klimaschränke maßen, steht nicht in diesem Dokument.")
	PaperChamber     = say4("Chamber {code}, {nominal}: mean {mean}, {range}", "Enceinte {code}, {nominal} : moyenne {mean}, {range}", "Klimaschrank {code}, {nominal}: Mittel {mean}, {range}")
	PaperHumidity    = say1("humidity {range} %", "humidité {range} %", "Feuchte {range} %")
	PaperReadings    = say("Readings", "Relevés", "Ablesungen")
	PaperJudgedBy    = say1("Computed by engine build {build}.", "Calculé par la version {build} du moteur.", "Berechnet mit dem Rechenkern {build}.")

	PaperRounds    = say2("{what}: reading rounds {rounds}", "{what} : relevés {rounds}", "{what}: Ableserunden {rounds}").unsure(DE)
	PaperBy        = say2("{name} ({rounds})", "{name} ({rounds})", "{name} ({rounds})")
	PaperReadBy    = say1("Read by {list}.", "Relevé par {list}.", "Abgelesen von {list}.")
	PaperEnteredBy = say2("{name}, entered by {other}", "{name}, saisi par {other}", "{name}, eingegeben von {other}")
	PaperWhat      = say2("{kind}, {method}", "{kind}, {method}", "{kind}, {method}")
	PaperAtStation = say2("{method} at {station}", "{method} à {station}", "{method} an {station}")

	KindRates      = say("daily rates", "marches diurnes", "tägliche Gänge")
	KindStates     = say("states", "états", "Stände")
	KindLeft       = say("state as left", "état après intervention", "Stand nach dem Stellen").unsure(DE)
	KindReplicate  = say("second reading as evidence", "seconde lecture comme preuve", "Zweitablesung als Nachweis")
	KindLateCheck  = say("late check as evidence", "contrôle tardif comme preuve", "spätere Kontrolle als Nachweis")
	MethodTyped    = say("typed in", "saisis", "eingegeben")
	MethodHand     = say("from the seconds hand", "à l’aiguille des secondes", "vom Sekundenzeiger")
	MethodTap      = say("by tapping at a mark", "par toucher au repère", "durch Antippen an einer Marke")
	MethodCamera   = say("by camera", "par caméra", "mit Kamera")
	MethodFullTime = say("from the full time shown", "à l’heure complète affichée", "von der ganzen angezeigten Zeit")
	MethodStation  = say("by a measuring station", "par un poste de mesure", "von einer Messstation")

	PaperNotes     = say("Remarks and corrections", "Observations et corrections", "Bemerkungen und Berichtigungen")
	PaperReplaced  = say4("Reading round {round}: {old} replaced by {new} ({reason})", "Relevé {round} : {old} remplacé par {new} ({reason})", "Ableserunde {round}: {old} ersetzt durch {new} ({reason})")
	PaperExtra     = say3("Reading round {round}, {what}: {value}", "Relevé {round}, {what} : {value}", "Ableserunde {round}, {what}: {value}").unsure(DE)
	PaperByAt      = say3("{what}; {name}, {instant}.", "{what} ; {name}, {instant}.", "{what}; {name}, {instant}.")
	PaperRemarkAt  = say2("Reading round {round}: {text}", "Relevé {round} : {text}", "Ableserunde {round}: {text}").unsure(DE)
	PaperDecided   = say1("Decision: {text}", "Décision : {text}", "Entscheidung: {text}")
	PaperAtEntry   = say("corrected at once", "corrigé aussitôt", "sofort berichtigt")
	PaperNoNotes   = say("None.", "Aucune.", "Keine.")
	PaperElsewhere = say1("{what}: on leaf 2.", "{what} : au feuillet 2.", "{what}: auf Blatt 2.")
	ObservedStop   = say("stopped", "arrêté", "stehengeblieben")
	ObservedHand   = say("hand loose", "aiguille mal fixée", "Zeiger lose").unsure(FR)
	ObservedUnread = say("could not be read", "illisible", "nicht lesbar")
	ObservedGone   = say("not there", "absent", "nicht vorhanden")
	ObservedDrop   = say("dropped", "tombé", "heruntergefallen")

	PaperCheck      = say("How to check this paper", "Vérifier ce document", "So prüfen Sie dieses Dokument")
	PaperScan       = say1("Scan the mark, or enter number and code at {address}. What appears there must agree with this paper in every figure.", "Scannez le symbole, ou saisissez numéro et code sur {address}. Chaque valeur affichée doit correspondre à ce document.", "Scannen Sie das Zeichen oder geben Sie Nummer und Code ein unter {address}. Was dort erscheint, muss in jeder Zahl mit diesem Dokument übereinstimmen.")
	PaperAsk        = say("The mark holds number and code. The laboratory that issued this paper can tell by them whether it is genuine.", "Le symbole contient numéro et code. Le laboratoire émetteur peut dire par eux si ce document est authentique.", "Das Zeichen enthält Nummer und Code. Das ausstellende Labor kann daran sagen, ob dieses Dokument echt ist.")
	PaperCode       = say("Code", "Code", "Code")
	PaperQR         = say1("Machine-readable mark: {content}", "Symbole lisible par machine : {content}", "Maschinenlesbares Zeichen: {content}")
	PaperReleased   = say("Released", "Libéré", "Freigegeben").unsure(FR)
	PaperReleasedBy = say2("{name}, {instant}", "{name}, {instant}", "{name}, {instant}")
	PaperSigned     = say("Signed by machine: the record behind this paper carries the laboratory’s electronic signature.", "Signé par machine : l’enregistrement de ce document porte la signature électronique du laboratoire.", "Maschinell signiert: Der Datensatz zu diesem Dokument trägt die elektronische Signatur des Labors.")

	PaperOneLeaf   = say2("leaf {leaf} of {all}; end", "feuillet {leaf} sur {all} ; fin", "Blatt {leaf} von {all}; Ende")
	PaperChart     = say1("Daily rates of {serial} by day, in the columns of the table above", "Marches diurnes de {serial} par jour, dans les colonnes du tableau ci-dessus", "Tägliche Gänge von {serial} nach Tagen, in den Spalten der Tabelle darüber")
	PaperLeaf      = say3("leaf {leaf} of {all}; continued on leaf {next}", "feuillet {leaf} sur {all} ; suite au feuillet {next}", "Blatt {leaf} von {all}; weiter auf Blatt {next}")
	PaperContinued = say1("{title}, continued", "{title}, suite", "{title}, Fortsetzung")

	PaperDemo      = say("DEMONSTRATION: this paper is signed with a throw-away key and proves nothing.", "DÉMONSTRATION : ce document est signé avec une clé jetable et ne prouve rien.", "VORFÜHRUNG: Dieses Dokument ist mit einem Wegwerfschlüssel signiert und beweist nichts.")
	PaperRevokedBy = say2("TAKEN BACK on {date}: {reason}. This paper is no longer valid.", "RETIRÉ le {date} : {reason}. Ce document n’est plus valable.", "ZURÜCKGENOMMEN am {date}: {reason}. Dieses Dokument gilt nicht mehr.")
	PaperReplacing = say1("REPLACED by {number}. This paper is no longer valid.", "REMPLACÉ par {number}. Ce document n’est plus valable.", "ERSETZT durch {number}. Dieses Dokument gilt nicht mehr.")
	AcrossRevoked  = say("TAKEN BACK", "RETIRÉ", "UNGÜLTIG")
	AcrossReplaced = say("REPLACED", "REMPLACÉ", "ERSETZT")

	CautionTitle         = say("The title of chronometer is protected in some countries; this paper alone gives no right to it.", "Le titre de chronomètre est protégé dans certains pays ; ce document seul n’y donne pas droit.", "Der Titel Chronometer ist in manchen Ländern geschützt; dieses Dokument allein gibt kein Recht darauf.")
	CautionAccreditation = say("Accreditation and local rules decide who may issue such a paper and what it is worth.", "L’accréditation et les règles locales décident qui peut établir un tel document et ce qu’il vaut.", "Akkreditierung und örtliche Regeln entscheiden, wer ein solches Dokument ausstellen darf und was es gilt.")
	CautionPublished     = say("Judged after published descriptions of the procedure, not as conforming to a standard.", "Jugé d’après des descriptions publiées de la procédure, et non comme conforme à une norme.", "Beurteilt nach veröffentlichten Beschreibungen des Verfahrens, nicht als normkonform.")
	CautionThisPiece     = say("The results concern this piece alone, as received. Copy this paper only whole.", "Les résultats ne concernent que cette pièce, telle que reçue. Ne copier ce document qu’en entier.", "Die Ergebnisse gelten nur für dieses Stück, wie eingegangen. Nur vollständig kopieren.")
)

// PaperTitle is the heading of a paper by the code in its record; a report of a failed trial never bears
// the title of a certificate.
func PaperTitle(code string, rejection bool) Text {
	switch {
	case rejection:
		return PaperRejection
	case code == "test_report":
		return PaperTestReport
	}
	return PaperCertificate
}

// Caution is the sentence for the code of a caution; an unknown code is shown as it is rather than left
// out.
func Caution(code string) Text {
	switch code {
	case "title_protected":
		return CautionTitle
	case "accreditation_decides":
		return CautionAccreditation
	case "published_descriptions":
		return CautionPublished
	case "this_piece_as_received":
		return CautionThisPiece
	}
	return Raw(code)
}

// PieceState is the word for a code of a piece's state.
func PieceState(code string) Text {
	switch code {
	case "uncased":
		return PaperUncased
	case "automatic_in":
		return PaperAutoIn
	case "automatic_out", "automatic_device_removed":
		return PaperAutoOut
	}
	return Raw(code)
}

// Observed is the word for an observation code.
func Observed(code string) Text {
	switch code {
	case "stopped":
		return ObservedStop
	case "hand":
		return ObservedHand
	case "unreadable":
		return ObservedUnread
	case "not_there":
		return ObservedGone
	case "dropped":
		return ObservedDrop
	}
	return Raw(code)
}

// ReadingKind is the word for a kind of reading.
func ReadingKind(code string) Text {
	switch code {
	case "rate":
		return KindRates
	case "state":
		return KindStates
	case "left":
		return KindLeft
	case "replicate":
		return KindReplicate
	case "late_check":
		return KindLateCheck
	}
	return Raw(code)
}

// ReadingMethod is the word for a method of reading.
func ReadingMethod(code string) Text {
	switch code {
	case "typed":
		return MethodTyped
	case "hand":
		return MethodHand
	case "tap":
		return MethodTap
	case "camera":
		return MethodCamera
	case "full_time":
		return MethodFullTime
	case "station":
		return MethodStation
	}
	return Raw(code)
}
