package words

// Certificates and reports: everything a paper says. A paper is printed from its frozen record, in the
// language of the record, so nothing here may turn on what the laboratory says today.
var (
	PaperCertificate = say("Rate certificate", "Bulletin de marche", "Gangschein")
	PaperTestReport  = say("Test report", "Rapport d’essai", "Prüfbericht")
	PaperRejection   = say("Report of a trial not passed", "Rapport d’épreuve non réussie", "Bericht: Prüfung nicht bestanden").unsure(FR, DE)
	PaperNumber      = say("Number", "Numéro", "Nummer")
	PaperIssued      = say1("issued {date}", "établi le {date}", "ausgestellt am {date}")
	PaperReplaces    = say2("Replaces {number}, which was revoked: {reason}.", "Remplace {number}, révoqué : {reason}.", "Ersetzt {number}, widerrufen: {reason}.")
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
	PaperNominal     = say("Positions and temperatures are those of the programme; what the chambers measured is not part of this paper.", "Positions et températures sont celles du programme ; les mesures des enceintes ne font pas partie de ce document.", "Lagen und Temperaturen sind die des Prüfprogramms; was die Klimaschränke maßen, steht nicht in diesem Papier.")
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
	PaperNoNotes   = say("No remark and no correction.", "Aucune observation ni correction.", "Keine Bemerkung, keine Berichtigung.")
	PaperNoReading = say("None.", "Aucun.", "Keine.")
	PaperElsewhere = say1("{what}: on leaf 2.", "{what} : au feuillet 2.", "{what}: auf Blatt 2.")
	ObservedStop   = say("stopped", "arrêté", "stehengeblieben")
	ObservedHand   = say("hand loose", "aiguille mal fixée", "Zeiger lose").unsure(FR)
	ObservedUnread = say("could not be read", "illisible", "nicht lesbar")
	ObservedGone   = say("not there", "absent", "nicht vorhanden")
	ObservedDrop   = say("dropped", "tombé", "heruntergefallen")

	PaperCheck      = say("How to check this paper", "Vérifier ce document", "So prüfen Sie dieses Papier")
	PaperScan       = say1("Scan the mark, or enter number and code at {address}. What appears there must agree with this paper in every figure.", "Scannez le symbole, ou saisissez numéro et code sur {address}. Chaque valeur affichée doit correspondre à ce document.", "Scannen Sie das Zeichen oder geben Sie Nummer und Code ein unter {address}. Was dort erscheint, muss in jeder Zahl mit diesem Papier übereinstimmen.")
	PaperAsk        = say("The mark holds number and code. The laboratory that issued this paper can tell by them whether it is genuine.", "Le symbole contient numéro et code. Le laboratoire émetteur peut dire par eux si ce document est authentique.", "Das Zeichen enthält Nummer und Code. Das ausstellende Labor kann daran sagen, ob dieses Papier echt ist.")
	PaperCode       = say("Code", "Code", "Code")
	PaperQR         = say1("Machine-readable mark: {content}", "Symbole lisible par machine : {content}", "Maschinenlesbares Zeichen: {content}")
	PaperReleased   = say("Released", "Émis", "Freigegeben").unsure(FR)
	PaperReleasedBy = say2("{name}, {instant}", "{name}, {instant}", "{name}, {instant}")
	PaperSigned     = say("Signed by machine: the record behind this paper carries the laboratory’s electronic signature.", "Signé par machine : l’enregistrement de ce document porte la signature électronique du laboratoire.", "Maschinell signiert: Der Datensatz zu diesem Papier trägt die elektronische Signatur des Labors.")

	PaperOneLeaf   = say2("leaf {leaf} of {all}; end", "feuillet {leaf} sur {all} ; fin", "Blatt {leaf} von {all}; Ende")
	PaperChart     = say1("Daily rates of {serial} by day, in the columns of the table above", "Marches diurnes de {serial} par jour, dans les colonnes du tableau ci-dessus", "Tägliche Gänge von {serial} nach Tagen, in den Spalten der Tabelle darüber")
	PaperLeaf      = say3("leaf {leaf} of {all}; continued on leaf {next}", "feuillet {leaf} sur {all} ; suite au feuillet {next}", "Blatt {leaf} von {all}; weiter auf Blatt {next}")
	PaperContinued = say1("{title}, continued", "{title}, suite", "{title}, Fortsetzung")

	PaperDemo      = say("DEMONSTRATION: this paper is signed with a throw-away key and proves nothing.", "DÉMONSTRATION : ce document est signé avec une clé jetable et ne prouve rien.", "VORFÜHRUNG: Dieses Papier ist mit einem Wegwerfschlüssel signiert und beweist nichts.")
	PaperRevokedBy = say2("REVOKED on {date}: {reason}. This paper is no longer valid.", "RÉVOQUÉ le {date} : {reason}. Ce document n’est plus valable.", "WIDERRUFEN am {date}: {reason}. Dieses Papier gilt nicht mehr.")
	PaperReplacing = say1("REPLACED by {number}. This paper is no longer valid.", "REMPLACÉ par {number}. Ce document n’est plus valable.", "ERSETZT durch {number}. Dieses Papier gilt nicht mehr.")
	AcrossRevoked  = say("REVOKED", "RÉVOQUÉ", "WIDERRUFEN")
	AcrossReplaced = say("REPLACED", "REMPLACÉ", "ERSETZT")

	CautionTitle         = say("The title of chronometer is protected in some countries; this paper alone gives no right to it.", "Le titre de chronomètre est protégé dans certains pays ; ce document seul n’y donne pas droit.", "Der Titel Chronometer ist in manchen Ländern geschützt; dieses Papier allein gibt kein Recht darauf.")
	CautionAccreditation = say("Accreditation and local rules decide who may issue such a paper and what it is worth.", "L’accréditation et les règles locales décident qui peut établir un tel document et ce qu’il vaut.", "Akkreditierung und örtliche Regeln entscheiden, wer ein solches Papier ausstellen darf und was es gilt.")
	CautionPublished     = say("Judged after published descriptions of the procedure, not as conforming to a standard.", "Jugé d’après des descriptions publiées de la procédure, et non comme conforme à une norme.", "Beurteilt nach veröffentlichten Beschreibungen des Verfahrens, nicht als normkonform.")
	CautionThisPiece     = say("The results concern this piece alone, as received. Copy this paper only whole.", "Les résultats ne concernent que cette pièce, telle que reçue. Ne copier ce document qu’en entier.", "Die Ergebnisse gelten nur für dieses Stück, wie eingegangen. Nur vollständig kopieren.")
)

// Releasing papers, finding them again, and checking them.
var (
	ReleaseTitle       = say("Release papers", "Émettre des documents", "Papiere freigeben").unsure(FR)
	ReleaseOf          = say("Release papers of batch", "Émettre les documents du lot", "Papiere freigeben zum Los").unsure(FR)
	ReleaseReadyC      = say("Certificates ready", "Bulletins prêts", "Gangscheine bereit")
	ReleaseReadyR      = say("Reports ready", "Rapports prêts", "Berichte bereit")
	ReleaseReason      = say("Reason", "Raison", "Grund")
	ReleaseWhat        = say3("{programme}; category {category}; {depositor}", "{programme} ; catégorie {category} ; {depositor}", "{programme}; Kategorie {category}; {depositor}")
	ReleaseReady       = say("Ready", "Prêts", "Bereit")
	ReleaseHeld        = say("Held", "Retenus", "Zurückgehalten")
	ReleasedAlready    = say("Released", "Émis", "Freigegeben").unsure(FR)
	ReleasePaper       = say("Paper", "Document", "Papier")
	ReleasePick        = say("Release", "Émettre", "Freigeben").unsure(FR)
	ReleasePickOne     = say1("Release {serial}", "Émettre {serial}", "{serial} freigeben").unsure(FR)
	ReleaseOutside     = say("Outside its limits, or cause", "Hors limites, ou cause", "Außerhalb der Grenzwerte, oder Grund")
	ReleaseCorrections = say("Corrections", "Corrections", "Berichtigungen")
	ReleaseRemarks     = say("Remarks", "Observations", "Bemerkungen")
	ReleaseHow         = say("How many", "Combien", "Wie viele")
	ReleaseChoose      = say("Choose at least one movement.", "Choisissez au moins un mouvement.", "Wählen Sie mindestens ein Werk.")
	ReleaseSelect      = say("Select", "Choisir", "Auswählen")
	ReleaseCerts       = say("certificates", "bulletins", "Gangscheine")
	ReleaseReps        = say("reports", "rapports", "Berichte")
	ReleaseChosen      = say("Release the selected papers", "Émettre les documents choisis", "Ausgewählte Papiere freigeben").unsure(FR)
	ReleaseCount       = plural("Release {n} paper", "Release {n} papers", "Émettre {n} document", "Émettre {n} documents", "{n} Papier freigeben", "{n} Papiere freigeben").unsure(FR)
	ReleaseEmpty       = say("Nothing is ready to be released", "Rien n’est prêt à être émis", "Nichts ist zur Freigabe bereit")
	ReleaseEmptyWhy    = say("A movement is ready when its trial is over, nothing holds it, and somebody other than you has read it.", "Un mouvement est prêt quand son épreuve est finie, que rien ne le retient et qu’une autre personne que vous l’a relevé.", "Ein Werk ist bereit, wenn seine Prüfung vorbei ist, nichts es zurückhält und jemand anderes als Sie es abgelesen hat.")
	ReleaseReplaces    = say1("replaces {number}", "remplace {number}", "ersetzt {number}")
	ReleaseReasons     = say("Why a release is held", "Pourquoi l’émission est retenue", "Was die Freigabe zurückhält")
	ReleaseNobody      = say("Nothing is held.", "Rien n’est retenu.", "Nichts wird zurückgehalten.")
	ReleaseCautions    = say("Before you release", "Avant d’émettre", "Vor der Freigabe").unsure(FR)
	ReleaseFrozen      = say("A released paper is signed and can never be changed. It can be revoked with a reason, and a new one can then replace it.", "Un document émis est signé et ne peut plus être changé. Il peut être révoqué avec un motif, et un nouveau peut alors le remplacer.", "Ein freigegebenes Papier ist signiert und lässt sich nie ändern. Es kann mit einem Grund widerrufen und dann durch ein neues ersetzt werden.")
	ReleaseNoText      = say("Nobody has compared this programme with the text of a standard: the papers say “after published descriptions of the procedure” and bear no standard’s number as their method.", "Personne n’a comparé ce programme avec le texte d’une norme : les documents disent « d’après des descriptions publiées de la procédure » et ne portent pas de numéro de norme comme méthode.", "Niemand hat dieses Prüfprogramm mit dem Text einer Norm verglichen: Die Papiere sagen „nach veröffentlichten Beschreibungen des Verfahrens“ und tragen keine Normnummer als Verfahren.")
	ReleaseNoU         = say("No uncertainty budget is stated: the papers say so, and verdicts make no allowance for it.", "Aucun bilan d’incertitude n’est indiqué : les documents le disent, et les verdicts n’en tiennent pas compte.", "Kein Unsicherheitsbudget ist angegeben: Die Papiere sagen das, und die Urteile rechnen nichts dafür ab.")
	ReleaseNoKey       = say("This program cannot sign papers", "Ce programme ne peut pas signer", "Dieses Programm kann nicht signieren")
	ReleaseNoKeyHow    = say("It was started without a signing key, so nothing can be released here. The laboratory manager sets it up.", "Il a été démarré sans clé de signature : rien ne peut être émis ici. La direction du laboratoire la met en place.", "Es wurde ohne Signaturschlüssel gestartet, darum kann hier nichts freigegeben werden. Die Laborleitung richtet ihn ein.")
	ReleaseDone        = plural("{n} paper released.", "{n} papers released.", "{n} document émis.", "{n} documents émis.", "{n} Papier freigegeben.", "{n} Papiere freigegeben.").unsure(FR)
	ReleaseNone        = say("Nothing new was released.", "Rien de nouveau n’a été émis.", "Nichts Neues wurde freigegeben.").unsure(FR)
	ReleaseNoneWhy     = say("What you chose has its papers already, or is held: the reasons stand below. No paper was issued twice.", "Ce que vous avez choisi a déjà ses documents ou est retenu : les raisons sont ci-dessous. Aucun document n’a été émis deux fois.", "Was Sie gewählt haben, hat seine Papiere schon oder wird zurückgehalten: Die Gründe stehen unten. Kein Papier wurde zweimal ausgestellt.")
	ReleaseDoneWhy     = say2("{certificates}, {reports}.", "{certificates}, {reports}.", "{certificates}, {reports}.")
	ReleaseNotAll      = plural("{n} of your choice was not released; the reason stands below.", "{n} of your choice were not released; the reasons stand below.", "{n} de votre choix n’a pas été émis ; la raison est ci-dessous.", "{n} de votre choix n’ont pas été émis ; les raisons sont ci-dessous.", "{n} aus Ihrer Auswahl wurde nicht freigegeben; der Grund steht unten.", "{n} aus Ihrer Auswahl wurden nicht freigegeben; die Gründe stehen unten.").unsure(FR)
	CountCerts         = plural("{n} certificate", "{n} certificates", "{n} bulletin", "{n} bulletins", "{n} Gangschein", "{n} Gangscheine")
	CountReports       = plural("{n} report", "{n} reports", "{n} rapport", "{n} rapports", "{n} Bericht", "{n} Berichte")
	CountPapers        = plural("{n} paper", "{n} papers", "{n} document", "{n} documents", "{n} Papier", "{n} Papiere")

	PapersTitle     = say("Papers of batch", "Documents du lot", "Papiere zum Los")
	PapersEmpty     = say("No paper was released yet", "Aucun document n’a été émis", "Noch kein Papier freigegeben").unsure(FR)
	PapersFill      = say("Certificates and reports stand here once the QA lead has released them.", "Bulletins et rapports figurent ici dès que la qualité les a émis.", "Gangscheine und Berichte stehen hier, sobald die QS sie freigegeben hat.").unsure(FR)
	PaperNumberHead = say("Paper", "Document", "Papier")
	PapersBy        = say("By", "Par", "Von")
	PapersKind      = say("Kind", "Genre", "Art")
	PapersNow       = say("Now", "Maintenant", "Jetzt")
	PapersValid     = say("valid", "valable", "gültig")
	PapersRevoked   = say2("revoked {date}: {reason}", "révoqué le {date} : {reason}", "widerrufen {date}: {reason}")
	PapersReplace   = say1("replaced by {number}", "remplacé par {number}", "ersetzt durch {number}")
	PapersPrint     = say("Print all valid papers", "Imprimer tous les documents valables", "Alle gültigen Papiere drucken")
	PapersPart      = say3("{title} {code}: {range}", "{title} {code} : {range}", "{title} {code}: {range}")
	PapersRange     = say2("{n} from movement {from} on", "{n} à partir du mouvement {from}", "{n} ab Werk {from}")
	PapersFurther   = say("Further papers", "Documents suivants", "Weitere Papiere")
	PapersThis      = say("These papers stand one below the other; each prints on its own leaf.", "Ces documents se suivent ; chacun s’imprime sur son propre feuillet.", "Diese Papiere stehen untereinander; jedes druckt auf ein eigenes Blatt.")

	PaperSignedFile = say("Signed record", "Enregistrement signé", "Signierter Datensatz")
	PaperKeyFile    = say("Public key", "Clé publique", "Öffentlicher Schlüssel")
	PaperInLanguage = say("In", "En", "Auf")
	RevokeTitle     = say("Revoke this paper", "Révoquer ce document", "Dieses Papier widerrufen")
	RevokeHint      = say("It stays readable, marked across. The movement can then be corrected and released again; the new paper names this one and the reason.", "Il reste lisible, marqué en travers. Le mouvement peut alors être corrigé et émis à nouveau ; le nouveau document nomme celui-ci et le motif.", "Es bleibt lesbar, quer gekennzeichnet. Das Werk kann dann berichtigt und neu freigegeben werden; das neue Papier nennt dieses und den Grund.").unsure(FR)
	RevokeReason    = say("Reason, printed on the paper", "Motif, imprimé sur le document", "Grund, auf dem Papier gedruckt")
	RevokeAct       = say("Revoke", "Révoquer", "Widerrufen")

	VerifyTitle   = say("Check a paper", "Vérifier un document", "Ein Papier prüfen")
	VerifySub     = say1("Papers issued by {house}", "Documents établis par {house}", "Papiere von {house}")
	VerifyHow     = say("Number and code stand beside the square mark on the paper. Both are needed.", "Numéro et code figurent à côté du symbole carré du document. Les deux sont nécessaires.", "Nummer und Code stehen neben dem quadratischen Zeichen auf dem Papier. Beide sind nötig.")
	VerifyNumber  = say("Number of the paper", "Numéro du document", "Nummer des Papiers")
	VerifyCode    = say("Code", "Code", "Code")
	VerifyCodeHow = say("28 letters and digits, with or without hyphens.", "28 lettres et chiffres, avec ou sans traits d’union.", "28 Buchstaben und Ziffern, mit oder ohne Bindestriche.")
	VerifyAct     = say("Check", "Vérifier", "Prüfen")
	VerifyNone    = say("This laboratory has issued no paper with this number and this code. Compare both with the paper, sign by sign; if they agree, the paper is not genuine.", "Ce laboratoire n’a établi aucun document avec ce numéro et ce code. Comparez les deux avec le document, signe par signe ; s’ils concordent, le document n’est pas authentique.", "Dieses Labor hat kein Papier mit dieser Nummer und diesem Code ausgestellt. Vergleichen Sie beide Zeichen für Zeichen mit dem Papier; stimmen sie überein, ist das Papier nicht echt.")
	VerifyNoNum   = say("Type the number of the paper.", "Saisissez le numéro du document.", "Geben Sie die Nummer des Papiers ein.")
	VerifyBadCode = say("This is not a code of a paper: a sign is missing or mistyped. Compare it with the paper.", "Ce n’est pas un code de document : un signe manque ou est mal saisi. Comparez-le avec le document.", "Das ist kein Code eines Papiers: Ein Zeichen fehlt oder ist vertippt. Vergleichen Sie ihn mit dem Papier.")
	VerifyNoCode  = say("Type the code beside the square mark.", "Saisissez le code à côté du symbole carré.", "Geben Sie den Code neben dem quadratischen Zeichen ein.")
	VerifyWait    = say1("Too many attempts from here. Wait {span}, then try again.", "Trop d’essais depuis ici. Attendez {span}, puis réessayez.", "Zu viele Versuche von hier. Warten Sie {span} und versuchen Sie es dann wieder.")
	VerifyGood    = say("This paper is genuine and valid.", "Ce document est authentique et valable.", "Dieses Papier ist echt und gültig.")
	VerifyGoodHow = say("Compare every figure of your paper with the one below.", "Comparez chaque valeur de votre document avec celui ci-dessous.", "Vergleichen Sie jede Zahl Ihres Papiers mit dem unten stehenden.")
	VerifyDemo    = say("This paper is a demonstration and proves nothing.", "Ce document est une démonstration et ne prouve rien.", "Dieses Papier ist eine Vorführung und beweist nichts.")
	VerifyOver    = say("This paper is genuine, but no longer valid.", "Ce document est authentique, mais n’est plus valable.", "Dieses Papier ist echt, gilt aber nicht mehr.")
	VerifyAnother = say("Check another paper", "Vérifier un autre document", "Ein anderes Papier prüfen")
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
