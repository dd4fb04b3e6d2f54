package words

import (
	"ratehouse/store"
	"ratehouse/trial"
)

// The technicians' pages: Today, intake, reading rounds, unloading.
var (
	TodaySum        = plural("{n} round to do", "{n} rounds to do", "{n} tournée à faire", "{n} tournées à faire", "{n} Runde zu machen", "{n} Runden zu machen").unsure(FR, DE)
	TodayLate       = plural("{n} of them late", "{n} of them late", "dont {n} en retard", "dont {n} en retard", "davon {n} verspätet", "davon {n} verspätet")
	TodayDone       = plural("{n} done", "{n} done", "{n} faite", "{n} faites", "{n} erledigt", "{n} erledigt")
	TodayDue        = say("Rounds to do", "Tournées à faire", "Zu machende Runden").unsure(FR, DE)
	DoneToday       = say("Done today", "Faites aujourd’hui", "Heute erledigt")
	ComingRounds    = say("Coming", "À venir", "Demnächst")
	TodayNone       = say("Nothing to read now", "Rien à relever pour l’instant", "Jetzt ist nichts abzulesen")
	TodayNoneText   = say("A batch stands here from its registration until its last round is read, each round at its own time.", "Un lot figure ici de son enregistrement jusqu’à sa dernière tournée, chaque tournée à son heure.", "Ein Los steht hier von der Annahme bis zu seiner letzten Runde, jede Runde zu ihrer Zeit.").unsure(FR, DE)
	UnderWay        = say("under way", "en cours", "läuft")
	LateUnderWay    = say1("{late}, under way", "{late}, en cours", "{late}, läuft")
	DueSince        = say1("due for {span}", "à faire depuis {span}", "fällig seit {span}")
	DoneAt          = say1("done at {time}", "faite à {time}", "erledigt um {time}")
	ClosedAt        = say1("closed at {time}", "close à {time}", "geschlossen um {time}")
	RoundStart      = say("Start", "Commencer", "Beginnen")
	RoundGoOn       = say("Go on", "Continuer", "Weiter")
	RoundLook       = say("Look", "Voir", "Ansehen")
	RoundAndCode    = say2("round {k} of {code}", "tournée {k} de {code}", "Runde {k} von {code}").unsure(FR, DE)
	MovementsReadIn = say1("Movements read in batch {code}", "Mouvements relevés du lot {code}", "Abgelesene Werke des Loses {code}")
	ReadOfMore      = say2("{read}, {more}", "{read}, {more}", "{read}, {more}")
	OutOfTrial      = plural("{n} out of the trial", "{n} out of the trial", "{n} hors de l’épreuve", "{n} hors de l’épreuve", "{n} nicht mehr in der Prüfung", "{n} nicht mehr in der Prüfung")

	RoundNumber      = say1("Round {k}", "Tournée {k}", "Runde {k}").unsure(FR, DE)
	RoundTitle       = say1("Round {k} of batch", "Tournée {k} du lot", "Runde {k} von Los").unsure(FR, DE)
	RoundBegins      = say1("begins the trial, opens {opens}", "ouvre l’épreuve et {opens}", "beginnt die Prüfung, öffnet {opens}")
	RoundCloses      = say2("closes {closes}, opens {opens}", "clôt {closes}, ouvre {opens}", "schließt {closes}, öffnet {opens}")
	RoundEnds        = say1("closes {closes}, ends the trial", "clôt {closes} et finit l’épreuve", "schließt {closes}, beendet die Prüfung")
	DayWhere         = say3("day {n} ({position}, {temperature})", "le jour {n} ({position}, {temperature})", "Tag {n} ({position}, {temperature})")
	DayWhereWith     = say3("day {n} ({position}, {temperature}, with chronograph)", "le jour {n} ({position}, {temperature}, chronographe enclenché)", "Tag {n} ({position}, {temperature}, mit Chronograph)")
	RoundAndBatch    = say2("{round}; {batch}", "{round} ; {batch}", "{round}; {batch}")
	SizeAndCalibre   = say2("{size}, {calibre}", "{size}, {calibre}", "{size}, {calibre}")
	CalibreCode      = say1("calibre {code}", "calibre {code}", "Kaliber {code}")
	ActSentence      = say1("{acts}.", "{acts}.", "{acts}.")
	AndThen          = say2("{first}, then {next}", "{first}, puis {next}", "{first}, dann {next}")
	ActReadEach      = say("read every movement", "relever chaque mouvement", "jedes Werk ablesen")
	ActStopAccessory = say("stop and reset the chronograph", "arrêter et remettre à zéro le chronographe", "den Chronographen stoppen und nullstellen")
	ActWindFully     = say("wind fully", "armer à fond", "voll aufziehen")
	ActRunAccessory  = say("start the chronograph", "enclencher le chronographe", "den Chronographen einschalten")
	ActTurnTo        = say1("turn to {position}", "tourner en {position}", "in Lage {position} drehen")
	ActMoveTo        = say1("put into {temperature}", "placer à {temperature}", "in {temperature} bringen")
	ReadNow          = say("Read in", "Relever en", "Ablesen in")
	AfterReading     = say1("After the reading: {acts}", "Après le relevé : {acts}", "Nach der Ablesung: {acts}")
	NothingAfter     = say("After the reading", "Après le relevé", "Nach der Ablesung")
	TrialEnds        = say("the trial ends", "l’épreuve est finie", "die Prüfung endet")
	Due              = say("Due", "À faire", "Fällig")
	DueWithin        = say2("{time} ± {tolerance}", "{time} ± {tolerance}", "{time} ± {tolerance}")
	ReadCell         = say("Read", "Relevés", "Abgelesen")
	LooksCell        = say("Second looks", "Contre-lectures", "Kontrollen")
	SecondLooks      = say("Second looks", "Contre-lectures", "Kontrollablesungen")
	CountOf          = say2("{read} of {all}", "{read} sur {all}", "{read} von {all}")

	CareTitle       = say("Take care", "Prudence", "Vorsicht")
	CareCold        = say("cold chamber", "enceinte froide", "Kälteschrank")
	CareWarm        = say("warm chamber", "étuve", "Wärmeschrank")
	CareWeekend     = say("weekend", "week-end", "Wochenende")
	CareColdText    = say1("Into {temperature}: make sure that the door opens from the inside and that nobody can lock it behind you, wear gloves and stay no longer than the work takes. Pieces out of the cold fog up in damp air: read them inside or through the window, never through fog.", "À {temperature} : assurez-vous que la porte s’ouvre de l’intérieur et que personne ne peut la verrouiller derrière vous, portez des gants et ne restez que le temps du travail. Les pièces sorties du froid s’embuent à l’air humide : relevez-les dans l’enceinte ou par la fenêtre, jamais à travers la buée.", "In {temperature}: Die Tür muss sich von innen öffnen lassen und niemand darf sie hinter Ihnen verschließen; tragen Sie Handschuhe und bleiben Sie nicht länger als nötig. Kalte Werke beschlagen in feuchter Luft: Lesen Sie drinnen oder durch das Fenster ab, nie durch Beschlag.")
	CareWarmText    = say1("Into {temperature}: keep the visit short, drink, and make sure that the door opens from the inside.", "À {temperature} : restez peu, buvez, et assurez-vous que la porte s’ouvre de l’intérieur.", "In {temperature}: Bleiben Sie kurz, trinken Sie, und achten Sie darauf, dass sich die Tür von innen öffnen lässt.")
	CareWeekendText = say1("{days}: whoever works alone tells somebody when they begin and when they have finished, carries a telephone, and does not go into a walk-in chamber alone.", "{days} : qui travaille seul prévient quelqu’un au début et à la fin, garde un téléphone sur soi et n’entre pas seul dans une chambre climatique.", "{days}: Wer allein arbeitet, meldet jemandem Beginn und Ende, trägt ein Telefon bei sich und betritt keine begehbare Klimakammer allein.")
	WindTitle       = say("Wind beforehand", "Armer d’avance", "Vorher aufziehen")
	WindBefore      = say3("wind before {time} and keep at {temperature} for at least {hours} h", "armer avant {time} et garder à {temperature} pendant {hours} h au moins", "vor {time} aufziehen und mindestens {hours} h bei {temperature} halten")
	WindPassed      = say3("had to be wound before {time} and kept at {temperature} for {hours} h; if it was not, note it as a remark", "devait être armé avant {time} et gardé à {temperature} pendant {hours} h ; sinon, notez une observation", "war vor {time} aufzuziehen und {hours} h bei {temperature} zu halten; wenn nicht, vermerken Sie das als Bemerkung")
	RoundZeroAt     = say1("round 0 at {time}", "tournée 0 à {time}", "Runde 0 um {time}").unsure(FR, DE)
	NewBatch        = say("New batch", "Nouveau lot", "Neues Los")
	PrintDaySheets  = say("Print day sheets", "Imprimer les feuilles du jour", "Tagesblätter drucken")
	DaySheet        = say("Day sheet", "Feuille du jour", "Tagesblatt")
)

// The reading round.
var (
	OpenRound       = say("Open round", "Ouvrir la tournée", "Runde öffnen").unsure(FR, DE)
	ReopenRound     = say("Reopen round", "Rouvrir la tournée", "Runde wieder öffnen").unsure(FR, DE)
	CloseRound      = say("Close round", "Clore la tournée", "Runde schließen").unsure(FR, DE)
	NotOpenTitle    = say("This round is not open yet", "Cette tournée n’est pas encore ouverte", "Diese Runde ist noch nicht geöffnet")
	NotOpenText     = say("Look at the clock and the holders first. Opening says who begins and when; readings can be typed from then on.", "Vérifiez d’abord l’horloge et les porte-mouvements. L’ouverture dit qui commence et quand ; on peut saisir dès lors.", "Prüfen Sie zuerst Uhr und Werkhalter. Das Öffnen hält fest, wer wann beginnt; ab dann kann eingegeben werden.")
	TooEarlyTitle   = say1("It is due {when}", "À faire {when}", "Sie ist fällig: {when}")
	TooEarlyText    = say("The programme counts 24 h from one reading to the next: a round read early is remarked.", "Le programme compte 24 h d’un relevé au suivant : une tournée avancée est signalée.", "Das Programm zählt 24 h von einer Ablesung zur nächsten: Eine verfrühte Runde wird vermerkt.")
	IsClosedTitle   = say1("This round was closed {when}", "Tournée close {when}", "Diese Runde wurde geschlossen: {when}")
	IsClosedText    = say("What is missing can still be typed in; a correction now names its reason.", "On peut encore saisir ce qui manque ; une correction indique désormais sa raison.", "Fehlendes kann noch eingegeben werden; eine Berichtigung nennt jetzt ihren Grund.")
	NothingToRead   = say("Nothing is read in this round", "Rien à relever dans cette tournée", "In dieser Runde wird nichts abgelesen")
	NothingToReadIn = say("This batch takes in daily rates: the first one closes day 1. Do what is written above, then close the round.", "Ce lot reçoit des marches diurnes : la première clôt le jour 1. Faites ce qui est indiqué ci-dessus, puis closez la tournée.", "Dieses Los nimmt tägliche Gänge auf: Der erste schließt Tag 1. Tun Sie, was oben steht, und schließen Sie dann die Runde.")
	HoldersTitle    = say("Holders", "Porte-mouvements", "Werkhalter").unsure(FR, DE)
	HolderOf        = say3("{n} of {all}: {code}", "{n} sur {all} : {code}", "{n} von {all}: {code}")
	HolderRead      = say2("{read} of {all} read", "{read} sur {all} relevés", "{read} von {all} abgelesen")
	AndLooks        = say2("{read}, read again: {n}", "{read}, à relire : {n}", "{read}, noch einmal: {n}")

	LegendKept    = say("kept here, not yet sent", "gardé ici, pas encore envoyé", "hier behalten, noch nicht gesendet")
	LegendAgain   = say("read again", "à relire", "noch einmal ablesen")
	LegendTrouble = say("needs you", "à décider", "braucht Sie")
	LegendOff     = say("out of the trial", "hors de l’épreuve", "nicht in der Prüfung")
	PlaceAgain    = say("again", "à relire", "nochmals")
	PlaceRefused  = say("refused", "refusé", "abgelehnt")
	PlaceTwo      = say("two values", "deux valeurs", "zwei Werte")
	PlaceTyped    = say("typed", "saisi", "getippt")

	FieldState    = say1("Place {n}: state, s", "Emplacement {n} : état, s", "Platz {n}: Stand, s")
	FieldRate     = say1("Place {n}: rate, s/d", "Emplacement {n} : marche, s/d", "Platz {n}: Gang, s/d")
	FieldAgain    = say1("Place {n}: read again", "Emplacement {n} : relever encore une fois", "Platz {n}: noch einmal ablesen")
	FieldOnceMore = say1("Place {n}: read once more", "Emplacement {n} : relever une dernière fois", "Platz {n}: ein letztes Mal ablesen")
	FieldCorrect  = say1("Place {n}: correct", "Emplacement {n} : corriger", "Platz {n}: berichtigen")
	FieldNone     = say1("Place {n}", "Emplacement {n}", "Platz {n}")
	SignState     = say("ahead +, behind −", "avance +, retard −", "voraus +, zurück −")
	SignRate      = say("gaining +, losing −", "avance +, retard −", "geht vor +, geht nach −")
	HintAgain     = say("Read the movement again and type what you see.", "Relevez encore le mouvement et saisissez ce que vous voyez.", "Lesen Sie das Werk noch einmal ab und tippen Sie, was Sie sehen.")
	HintOwn       = say1("You typed {value}. Type the right one over it.", "Vous avez saisi {value}. Saisissez la bonne valeur.", "Sie haben {value} eingegeben. Geben Sie den richtigen Wert ein.")
	HintOwnUnseen = say("You have read it. Type the right value over it.", "Vous l’avez relevé. Saisissez la bonne valeur.", "Sie haben es abgelesen. Geben Sie den richtigen Wert ein.")
	HintOther     = say("It was read. Another value needs a reason.", "Il est relevé. Une autre valeur demande une raison.", "Es ist abgelesen. Ein anderer Wert braucht einen Grund.")
	HintEnded     = say1("Out of the trial: {end}.", "Hors de l’épreuve : {end}.", "Nicht mehr in der Prüfung: {end}.")
	HintEmpty     = say("No movement lies here.", "Aucun mouvement ici.", "Hier liegt kein Werk.")
	ReasonLabel   = say("Reason of the correction", "Raison de la correction", "Grund der Berichtigung")
	ReasonNeeded  = say("Say why the value changes: it stands on the rate sheet.", "Dites pourquoi la valeur change : cela figure sur la feuille de marche.", "Sagen Sie, warum sich der Wert ändert: Es steht auf dem Gangblatt.").unsure(FR, DE)

	KeysLabel   = say("Keys", "Touches", "Tasten")
	KeyMinus    = say("minus", "moins", "minus")
	KeyPlus     = say("plus", "plus", "plus")
	KeyPoint    = say("decimal point", "virgule décimale", "Dezimalkomma")
	KeyDelete   = say("Delete", "Effacer", "Löschen")
	KeyEnter    = say("Enter", "Entrer", "Eingabe")
	KeySkip     = say("Skip", "Passer", "Auslassen")
	KeyMenu     = say("End, remark", "Fin, observation", "Ende, Bemerkung")
	CodesLabel  = say("No value: what is seen", "Sans valeur : ce qu’on voit", "Kein Wert: was man sieht")
	SkipToField = say("Skip to the reading field", "Aller au champ de relevé", "Zum Eingabefeld")

	PlaceSaved     = say2("Place {n} saved at {time}.", "Emplacement {n} enregistré à {time}.", "Platz {n} gespeichert um {time}.")
	PlaceKeptNow   = say1("Place {n} kept here; it goes out by itself.", "Emplacement {n} gardé ici ; il part tout seul.", "Platz {n} hier behalten; er geht von selbst hinaus.")
	PlaceReadAgain = say1("Place {n}: please read it again.", "Emplacement {n} : relevez-le encore une fois.", "Platz {n}: bitte noch einmal ablesen.")
	PlaceOnceMore  = say1("Place {n}: the two differ. Please read it once more.", "Emplacement {n} : les deux diffèrent. Relevez-le une dernière fois.", "Platz {n}: Die beiden weichen voneinander ab. Bitte ein letztes Mal ablesen.")
	SavedAfterLook = say2("{saved} It was asked for again because {why}.", "{saved} Il était redemandé parce que {why}.", "{saved} Es wurde noch einmal gefragt, weil {why}.")
	WhyBeyond60    = say("the first value meant a rate of more than 60 s/d", "la première valeur donnait une marche de plus de 60 s/d", "der erste Wert einen Gang über 60 s/d bedeutete")
	AskReadAgain   = say1("Read place {n} again", "Relire l’emplacement {n}", "Platz {n} noch einmal ablesen")
	AskTypeAgain   = say1("Type place {n} again", "Ressaisir l’emplacement {n}", "Platz {n} noch einmal eingeben")
	AskTitle       = say("These places need you", "Ces emplacements vous attendent", "Diese Plätze brauchen Sie")
	AskWhere       = say2("{holder}, place {n}", "{holder}, emplacement {n}", "{holder}, Platz {n}")
	TypedValue     = say1("You typed {value}.", "Vous avez saisi {value}.", "Sie haben {value} eingegeben.")
	ConflictTwo    = say4("Somebody else was first: {name} read {value} at {time}. You typed {mine}.", "Quelqu’un a été plus rapide : {name} a relevé {value} à {time}. Vous avez saisi {mine}.", "Jemand war schneller: {name} hat um {time} {value} abgelesen. Sie haben {mine} eingegeben.")
	ConflictAt     = say1("typed at {time}", "saisi à {time}", "eingegeben um {time}")
	ConflictDecide = say("Decide together which one stands.", "Décidez ensemble laquelle reste.", "Entscheiden Sie gemeinsam, welcher Wert bleibt.")
	LeaveTheirs    = say1("Leave {value}", "Laisser {value}", "{value} lassen")
	PutMine        = say1("Put {value} in its place", "Mettre {value} à la place", "{value} an die Stelle setzen")
	ConflictReason = say("read by two people, agreed at the bench", "relevé par deux personnes, convenu à l’établi", "von zwei Personen abgelesen, am Platz abgestimmt")
	BothAgree      = say2("Place {n}: {name} had read the same value already.", "Emplacement {n} : {name} avait déjà relevé la même valeur.", "Platz {n}: {name} hatte schon denselben Wert abgelesen.")
	NotANumber     = say("This is not a number. Type digits with a sign and one point, or choose what is seen.", "Ce n’est pas un nombre. Saisissez des chiffres avec un signe et une virgule, ou choisissez ce qu’on voit.", "Das ist keine Zahl. Tippen Sie Ziffern mit Vorzeichen und einem Komma, oder wählen Sie, was man sieht.")
	EmptyField     = say("Type a value, or go on with the arrows.", "Saisissez une valeur, ou avancez avec les flèches.", "Geben Sie einen Wert ein, oder gehen Sie mit den Pfeilen weiter.")
	AllRead        = say("Everything is read. Do what follows the reading, then close the round.", "Tout est relevé. Faites ce qui suit le relevé, puis clôturez la tournée.", "Alles ist abgelesen. Tun Sie, was nach der Ablesung folgt, und schließen Sie dann die Runde.")
	HolderDone     = say1("{holder} is read.", "{holder} est relevé.", "{holder} ist abgelesen.")
	GoOnTo         = say1("Enter goes on to place {n}.", "Entrer passe à l’emplacement {n}.", "Eingabe geht weiter zu Platz {n}.")

	NetTitle      = say1("No connection since {time}. Go on reading.", "Pas de connexion depuis {time}. Continuez à relever.", "Keine Verbindung seit {time}. Lesen Sie weiter ab.")
	NetText       = say1("Readings kept in this page: {n}. They go out by themselves when the connection is back. Do not close or reload this page until then.", "Relevés gardés dans cette page : {n}. Ils partent seuls dès que la connexion revient. Ne fermez ni ne rechargez cette page d’ici là.", "In dieser Seite behaltene Ablesungen: {n}. Sie gehen von selbst hinaus, sobald die Verbindung wieder da ist. Schließen Sie diese Seite bis dahin nicht und laden Sie sie nicht neu.")
	SignedOutNet  = say("You have been signed out. Go on reading.", "Vous avez été déconnecté. Continuez à relever.", "Sie wurden abgemeldet. Lesen Sie weiter ab.")
	SignedOutText = say1("Readings kept in this page: {n}. Sign in on a new page; they go out by themselves afterwards.", "Relevés gardés dans cette page : {n}. Connectez-vous sur une nouvelle page ; ils partiront seuls ensuite.", "In dieser Seite behaltene Ablesungen: {n}. Melden Sie sich auf einer neuen Seite an; danach gehen sie von selbst hinaus.")
	TryNow        = say("Try now", "Essayer maintenant", "Jetzt versuchen")
	WaitForQueue  = say1("Wait a moment: readings still to be sent: {n}.", "Un instant : relevés encore à envoyer : {n}.", "Einen Augenblick: noch zu sendende Ablesungen: {n}.")
	NeedsScript   = say("This page works without its script too, one reading at a time.", "Cette page fonctionne aussi sans son script, un relevé à la fois.", "Diese Seite arbeitet auch ohne ihr Skript, eine Ablesung nach der anderen.")
	CallRefused   = say("The server did not accept this call. Type the value again; if it happens again, tell the laboratory manager.", "Le serveur n’a pas accepté cet envoi. Ressaisissez la valeur ; si cela se répète, prévenez la direction du laboratoire.", "Der Server hat diese Sendung nicht angenommen. Geben Sie den Wert noch einmal ein; wenn es sich wiederholt, sagen Sie es der Laborleitung.")

	CloseTitle     = say1("Close round {k} of batch", "Clore la tournée {k} du lot", "Runde {k} schließen, Los").unsure(FR, DE)
	CloseMissing   = plural("{n} movement is not read", "{n} movements are not read", "{n} mouvement n’est pas relevé", "{n} mouvements ne sont pas relevés", "{n} Werk ist nicht abgelesen", "{n} Werke sind nicht abgelesen")
	CloseMissText  = say("A day that misses a reading has no rate, and no criterion that needs it can be decided. Read them now, or close the round without them.", "Un jour sans relevé n’a pas de marche, et aucun critère qui en dépend ne peut être décidé. Relevez-les maintenant, ou closez la tournée sans eux.", "Ein Tag ohne Ablesung hat keinen Gang, und kein Kriterium, das ihn braucht, kann entschieden werden. Lesen Sie sie jetzt ab, oder schließen Sie die Runde ohne sie.")
	CloseWithout   = plural("Close without {n} reading", "Close without {n} readings", "Clore sans {n} relevé", "Clore sans {n} relevés", "Ohne {n} Ablesung schließen", "Ohne {n} Ablesungen schließen")
	CloseLooksText = plural("{n} of them waits for a second look.", "{n} of them wait for a second look.", "{n} attend une contre-lecture.", "{n} attendent une contre-lecture.", "{n} davon wartet auf die Kontrollablesung.", "{n} davon warten auf die Kontrollablesung.")
	CloseChanged   = say("What is missing has changed meanwhile. Look at the list again.", "Ce qui manque a changé entre-temps. Regardez la liste encore une fois.", "Was fehlt, hat sich inzwischen geändert. Sehen Sie die Liste noch einmal an.")
	MissingList    = say("Not read", "Non relevés", "Nicht abgelesen")
	BackToRound    = say("Back to the round", "Retour à la tournée", "Zurück zur Runde").unsure(FR, DE)
	SecondLookOpen = say("second look still open", "contre-lecture en attente", "Kontrollablesung steht aus")
)

// What can be done with one movement or with the round besides reading.
var (
	PieceTitle     = say("Movement", "Mouvement", "Werk")
	PieceWhere     = say3("{round}, {holder}, place {n}", "{round}, {holder}, emplacement {n}", "{round}, {holder}, Platz {n}")
	RemarkAct      = say("Add a remark", "Observation", "Bemerkung") // short: it stands in the title of a round
	RemarkTitle    = say("Add a remark", "Ajouter une observation", "Bemerkung hinzufügen")
	RemarkLabel    = say("What was seen or done", "Ce qui a été vu ou fait", "Was gesehen oder getan wurde")
	RemarkHint     = say("It stays on the movement; an open remark holds its release until the QA lead has decided.", "Elle reste attachée au mouvement ; une observation ouverte retient la libération jusqu’à la décision de la qualité.", "Sie bleibt beim Werk; eine offene Bemerkung hält die Freigabe zurück, bis die QS entschieden hat.")
	RemarkHintAll  = say("It stays on the batch at this round.", "Elle reste attachée au lot, à cette tournée.", "Sie bleibt beim Los, an dieser Runde.")
	RemarkSave     = say("Save the remark", "Enregistrer l’observation", "Bemerkung speichern")
	RemarkSaved    = say("The remark is saved.", "L’observation est enregistrée.", "Die Bemerkung ist gespeichert.")
	EndTitle       = say("End its trial", "Finir son épreuve", "Seine Prüfung beenden")
	EndHow         = say("How it leaves", "Comment il sort", "Wie es ausscheidet")
	EndRejectedFor = say("rejected for cause: it stopped, a hand is loose, it does not start, it cannot be read. Counts as fail.", "refusé pour cause : arrêté, aiguille lâche, ne démarre pas, illisible. Compte comme échec.", "aus Gründen zurückgewiesen: steht, Zeiger lose, läuft nicht an, nicht ablesbar. Zählt als nicht bestanden.")
	EndWithdrawnBy = say("withdrawn by the depositor. Leaves the yield.", "retiré par le déposant. Sort du taux de réussite.", "vom Auftraggeber zurückgezogen. Zählt nicht zur Ausbeute.")
	EndVoidBy      = say("void by the laboratory: damaged here, dropped, chamber, missed. Leaves the yield.", "annulé par le laboratoire : abîmé ici, tombé, enceinte, manqué. Sort du taux de réussite.", "vom Labor für ungültig erklärt: hier beschädigt, gefallen, Klimaschrank, verpasst. Zählt nicht zur Ausbeute.")
	EndCause       = say("Cause in words", "Cause en toutes lettres", "Grund in Worten")
	EndSeen        = say("What was seen", "Ce qu’on a vu", "Was gesehen wurde")
	EndSeenNothing = say("nothing of these", "rien de cela", "nichts davon")
	EndGrave       = say1("End the trial of {serial}", "Finir l’épreuve de {serial}", "Prüfung von {serial} beenden")
	EndGraveText   = say("No further reading is taken; what was read stays. The QA lead can take the end back before release.", "Plus aucun relevé ; ce qui est relevé reste. La qualité peut annuler cette fin avant la libération.", "Es wird nicht mehr abgelesen; Abgelesenes bleibt. Die QS kann das Ende vor der Freigabe zurücknehmen.")
	EndIs          = say2("Its trial has ended: {end}. {cause}", "Son épreuve est finie : {end}. {cause}", "Seine Prüfung ist beendet: {end}. {cause}")
	EndBack        = say("Take the end back", "Annuler cette fin", "Ende zurücknehmen")
	EndChoose      = say("Say how it leaves.", "Dites comment il sort.", "Sagen Sie, wie es ausscheidet.")
)

// Registering a batch.
var (
	RegisterTitle   = say("New batch", "Nouveau lot", "Neues Los")
	RegisterSub     = say("Registers the movements, lays them into holders and plans the rounds.", "Enregistre les mouvements, les place dans des porte-mouvements et prévoit les tournées.", "Nimmt die Werke an, legt sie in Werkhalter und plant die Runden.").unsure(FR, DE)
	RegisterAct     = say("Register the batch", "Enregistrer le lot", "Los annehmen")
	CheckAct        = say("Check the list", "Vérifier la liste", "Liste prüfen")
	BatchCode       = say("Batch code", "Code du lot", "Los-Kennung")
	BatchCodeHint   = say("Capital letters, digits and . _ -", "Majuscules, chiffres et . _ -", "Großbuchstaben, Ziffern und . _ -")
	CodeTaken       = say2("{code} is in use already. The next free one is {free}.", "{code} est déjà utilisé. Le prochain libre est {free}.", "{code} ist schon vergeben. Die nächste freie Kennung ist {free}.")
	CodeLike        = say2("{code} cannot be a code: capital letters, digits and . _ - only, a letter or digit first. It could be {better}.", "{code} ne peut pas être un code : majuscules, chiffres et . _ - seulement, d’abord une lettre ou un chiffre. Par exemple {better}.", "{code} kann keine Kennung sein: nur Großbuchstaben, Ziffern und . _ -, zuerst ein Buchstabe oder eine Ziffer. Möglich wäre {better}.")
	CalibreHint     = say("Choose a known one or type a new code. May stay empty when the category is given.", "Choisissez un code connu ou saisissez-en un nouveau. Facultatif si la catégorie est donnée.", "Wählen Sie ein bekanntes oder geben Sie eine neue Kennung ein. Darf leer bleiben, wenn die Kategorie angegeben ist.")
	DepositorHint   = say("Choose a known one or type a new code.", "Choisissez un code connu ou saisissez-en un nouveau.", "Wählen Sie einen bekannten oder geben Sie eine neue Kennung ein.")
	CategoryByCard  = say("as the calibre’s card says", "selon la fiche du calibre", "wie auf der Kaliberkarte")
	CategoryOption  = say2("{code}: {title}", "{code} : {title}", "{code}: {title}")
	ProgrammeOption = say3("{code}, version {version}: {title}", "{code}, version {version} : {title}", "{code}, Fassung {version}: {title}")
	StartsAt        = say("Round 0 is due at", "Tournée 0 à faire le", "Runde 0 ist fällig am").unsure(FR, DE)
	StartsAtHint    = say1("Date and time, 2026-12-01 08:30, {offset}. Every further round is due 24 h later.", "Date et heure, 2026-12-01 08:30, {offset}. Chaque tournée suivante est à faire 24 h plus tard.", "Datum und Uhrzeit, 2026-12-01 08:30, {offset}. Jede weitere Runde ist 24 h später fällig.")
	StartsAtForm    = say("Write date and time as 2026-12-01 08:30.", "Écrivez date et heure comme 2026-12-01 08:30.", "Schreiben Sie Datum und Uhrzeit wie 2026-12-01 08:30.")
	StartsAtGap     = say1("This time does not exist on that day: the clocks are put forward. {time} does.", "Cette heure n’existe pas ce jour-là : on avance les horloges. {time} existe.", "Diese Uhrzeit gibt es an dem Tag nicht: Die Uhren werden vorgestellt. {time} gibt es.")
	WindBy          = say3("{programme}: wind and keep at {temperature} for at least {hours} h before.", "{programme} : armer et garder à {temperature} pendant {hours} h au moins avant.", "{programme}: vorher aufziehen und mindestens {hours} h bei {temperature} halten.")
	EntryLabel      = say("What is typed each day", "Ce qu’on saisit chaque jour", "Was täglich eingegeben wird")
	EntryStateText  = say("the state: what the movement shows against the reference clock, in seconds, read at every round. The rates are computed from two states and the time between them.", "l’état : ce qu’indique le mouvement par rapport à l’horloge de référence, en secondes, relevé à chaque tournée. Les marches sont calculées de deux états et du temps entre eux.", "der Stand: was das Werk gegenüber der Referenzuhr zeigt, in Sekunden, bei jeder Runde abgelesen. Die Gänge werden aus zwei Ständen und der Zeit dazwischen berechnet.")
	EntryRateText   = say("the daily rate in s/d, computed elsewhere. Nothing is known then of the states, their instants and their uncertainty.", "la marche diurne en s/d, calculée ailleurs. On ne connaît alors ni les états, ni leurs instants, ni leur incertitude.", "der tägliche Gang in s/d, anderswo berechnet. Über Stände, Zeitpunkte und Messunsicherheit ist dann nichts bekannt.")
	Over24hLabel    = say("Each rate is the difference of two states about 24 h apart, not the reading of a timing machine", "Chaque marche est la différence de deux états à environ 24 h, et non la lecture d’un contrôleur de marche", "Jeder Gang ist der Unterschied zweier Stände im Abstand von etwa 24 h, nicht die Anzeige einer Zeitwaage")
	Over24hHint     = say("Needed when rates are typed: an instantaneous rate looks the same and is not the method.", "Nécessaire pour saisir des marches : une marche instantanée se ressemble et n’est pas la méthode.", "Nötig, wenn Gänge eingegeben werden: Ein momentaner Gang sieht gleich aus und ist nicht das Verfahren.")
	Over24hNeeded   = say("Confirm it, or choose the state. Instantaneous rates cannot be judged.", "Confirmez-le, ou choisissez l’état. Des marches instantanées ne peuvent être jugées.", "Bestätigen Sie es, oder wählen Sie den Stand. Momentane Gänge lassen sich nicht beurteilen.")
	HolderTypeLabel = say("Holders to lay them in", "Porte-mouvements à utiliser", "Werkhalter dafür").unsure(FR, DE)
	HolderTypeSize  = say3("{title}: {places}, {rows}", "{title} : {places}, {rows}", "{title}: {places}, {rows}")
	RowsByColumns   = say2("{rows} × {columns}", "{rows} × {columns}", "{rows} × {columns}")
	NumbersHint     = say("One a line, or a table with the header serial or serial,place.", "Un par ligne, ou un tableau avec l’en-tête serial ou serial,place.", "Eine je Zeile, oder eine Tabelle mit der Kopfzeile serial oder serial,place.")
	NumbersFile     = say("or a file", "ou un fichier", "oder eine Datei")
	NumbersFileHint = say("CSV or text, UTF-8 or UTF-16.", "CSV ou texte, UTF-8 ou UTF-16.", "CSV oder Text, UTF-8 oder UTF-16.")
	NumbersTwice    = say("Numbers were typed and a file was chosen. Send one of them.", "Des numéros sont saisis et un fichier est choisi. N’envoyez que l’un des deux.", "Es wurden Nummern eingegeben und eine Datei gewählt. Senden Sie nur eines von beiden.")
	LineFault       = say2("line {line}: {why}", "ligne {line} : {why}", "Zeile {line}: {why}")
	MoreFaults      = plural("and {n} more line", "and {n} more lines", "et {n} autre ligne", "et {n} autres lignes", "und {n} weitere Zeile", "und {n} weitere Zeilen")
	DeliveryTitle   = say("Delivery (may stay empty)", "Livraison (facultatif)", "Lieferung (darf leer bleiben)")
	DeliveryNote    = say("Delivery note", "Bulletin de livraison", "Lieferschein")
	OrderNumber     = say("Depositor’s order number", "Numéro de commande du déposant", "Bestellnummer des Auftraggebers")
	ConditionLabel  = say("Condition on receipt", "État à la réception", "Zustand bei Annahme")
	LiftLabel       = say("Reason to test numbers again that hold a certificate", "Raison de reprendre des numéros qui ont un bulletin", "Grund, Nummern mit Gangschein erneut zu prüfen")
	PreviewTitle    = say("What will be registered", "Ce qui sera enregistré", "Was angenommen wird")
	PreviewNone     = say("Type or paste the numbers: their count and the holders they need appear here.", "Saisissez ou collez les numéros : leur nombre et les porte-mouvements nécessaires apparaissent ici.", "Geben Sie die Nummern ein oder fügen Sie sie ein: Anzahl und nötige Werkhalter erscheinen hier.")
	PreviewHolders  = plural("{n} holder {title}", "{n} holders {title}", "{n} porte-mouvements {title}", "{n} porte-mouvements {title}", "{n} Werkhalter {title}", "{n} Werkhalter {title}").unsure(FR, DE)
	PreviewFirst    = say2("{first} to {last}", "{first} à {last}", "{first} bis {last}")
	PreviewLastEnds = say1("The trial ends on {day}.", "L’épreuve finit le {day}.", "Die Prüfung endet am {day}.")
	PreviewFaults   = plural("{n} line is refused", "{n} lines are refused", "{n} ligne est refusée", "{n} lignes sont refusées", "{n} Zeile wird abgelehnt", "{n} Zeilen werden abgelehnt")
	PreviewGood     = say("The list can be registered.", "La liste peut être enregistrée.", "Die Liste kann angenommen werden.")
)

// The day sheet, for use when no screen works.
var (
	DaySheetTitle  = say2("Day sheet: {round}, {date}", "Feuille du jour : {round}, {date}", "Tagesblatt: {round}, {date}")
	DaySheetPrint  = plural("Print {n} leaf", "Print {n} leaves", "Imprimer {n} feuillet", "Imprimer {n} feuillets", "{n} Blatt drucken", "{n} Blätter drucken")
	LeafOf         = say2("leaf {n} of {all}", "feuillet {n} sur {all}", "Blatt {n} von {all}")
	ReadAtCell     = say("Read at", "Relever à", "Ablesen um")
	ThenCell       = say("Then", "Ensuite", "Danach")
	SignCell       = say("Sign", "Signe", "Vorzeichen")
	WriteState     = say("State, s (sign!)", "État, s (signe !)", "Stand, s (Vorzeichen!)")
	WriteRate      = say("Rate, s/d (sign!)", "Marche, s/d (signe !)", "Gang, s/d (Vorzeichen!)")
	WriteTime      = say("Time, if not on time", "Heure, si décalée", "Uhrzeit, wenn abweichend")
	WriteCode      = say("Code, remark", "Code, observation", "Zeichen, Bemerkung")
	BegunAt        = say("Begun at", "Commencé à", "Begonnen um")
	EndedAt        = say("Ended at", "Fini à", "Beendet um")
	ReadBy         = say("Read by", "Relevé par", "Abgelesen von")
	TypedBy        = say("Typed in by", "Saisi par", "Eingegeben von")
	DaySheetCare   = say("For use when no screen works. Write every sign. Strike a wrong figure through with one line so that it stays legible, and write the right one beside it. No value: S stopped, H hand, U unreadable, N not there, D dropped.", "À utiliser quand aucun écran ne marche. Écrivez chaque signe. Barrez un chiffre faux d’un seul trait pour qu’il reste lisible et écrivez le bon à côté. Sans valeur : S arrêté, H aiguille, U illisible, N absent, D tombé.", "Für den Fall, dass kein Bildschirm geht. Schreiben Sie jedes Vorzeichen. Streichen Sie eine falsche Zahl mit einem Strich durch, sodass sie lesbar bleibt, und schreiben Sie die richtige daneben. Kein Wert: S steht, H Zeiger, U unlesbar, N nicht da, D gefallen.")
	DaySheetOf     = say2("{batch}, {round}", "{batch}, {round}", "{batch}, {round}")
	HolderCodeHead = say1("Holder {code}", "Porte-mouvements {code}", "Werkhalter {code}").unsure(FR, DE)
)

// Observations, each with the key that stands for it in every language.
var (
	SeenStopped    = say("stopped", "arrêté", "steht")
	SeenHand       = say("hand touches or is loose", "aiguille qui touche ou lâche", "Zeiger streift oder ist lose")
	SeenUnreadable = say("unreadable", "illisible", "nicht ablesbar")
	SeenNotThere   = say("not there", "absent", "nicht da")
	SeenDropped    = say("dropped", "tombé", "gefallen")
	SeenHandShort  = say("hand", "aiguille", "Zeiger")
)

// Seen is the word for an observation.
func Seen(o store.Observation) Text {
	switch o {
	case store.Stopped:
		return SeenStopped
	case store.HandLoose:
		return SeenHand
	case store.Unreadable:
		return SeenUnreadable
	case store.NotThere:
		return SeenNotThere
	case store.Dropped:
		return SeenDropped
	}
	return Raw(string(o))
}

// SeenShort is Seen where there is little room: in a place, on a key.
func SeenShort(o store.Observation) Text {
	if o == store.HandLoose {
		return SeenHandShort
	}
	return Seen(o)
}

// EndWord is the word for how a movement left the trial.
func EndWord(e store.End) Text {
	switch e {
	case store.Rejected:
		return EndRejected
	case store.Withdrawn:
		return EndWithdrawn
	case store.Void:
		return EndVoid
	case store.Removed:
		return EndRemoved
	}
	return Raw("")
}

// ActWord says one act of a round.
func ActWord(p *Printer, a trial.Act) Text {
	switch a.Kind {
	case trial.ActRead:
		return ActReadEach
	case trial.ActAccessoryOff:
		return ActStopAccessory
	case trial.ActWind:
		return ActWindFully
	case trial.ActAccessoryOn:
		return ActRunAccessory
	case trial.ActTurn:
		return ActTurnTo.With(string(a.To))
	case trial.ActMove:
		return ActMoveTo.With(p.Celsius(a.ToC.String()))
	}
	return Raw(string(a.Kind))
}

// WeekdayLong names the days of a weekend in full.
var (
	Saturday = say("Saturday", "samedi", "Samstag")
	Sunday   = say("Sunday", "dimanche", "Sonntag")
)
