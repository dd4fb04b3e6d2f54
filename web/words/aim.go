package words

// What a batch would yield with all its rates shifted.
var (
	AimTitle            = say("What if all rates were shifted", "Si toutes les marches étaient décalées", "Wenn alle Gänge verschoben wären")
	AimShow             = say("Show the yield against a shift", "Montrer le taux de réussite selon le décalage", "Ausbeute über der Verschiebung zeigen").unsure(FR, DE)
	AimNow              = say2("As they are, {pass} of {n} movements judged in full pass.", "Tels quels, {pass} des {n} mouvements entièrement jugés réussissent.", "So wie sie sind, bestehen {pass} von {n} vollständig beurteilten Werken.")
	AimBest             = say2("Most would pass, {pass}, with all rates shifted by {shifts}.", "Le plus grand nombre, {pass}, réussirait avec toutes les marches décalées de {shifts}.", "Die meisten, {pass}, bestünden mit allen Gängen verschoben um {shifts}.")
	AimStays            = say("No shift would let more pass.", "Aucun décalage n’en ferait réussir davantage.", "Keine Verschiebung ließe mehr bestehen.")
	AimNear             = say1("At most one in a hundred fewer would with a shift of {shifts}.", "Au plus un sur cent de moins avec un décalage de {shifts}.", "Höchstens eines von hundert weniger mit einer Verschiebung um {shifts}.")
	AimSure             = say1("Of 100 lots drawn from this one, 95 have the middle of their best shift in {shifts}.", "Sur 100 lots tirés de celui-ci, 95 ont le milieu de leur meilleur décalage dans {shifts}.", "Von 100 aus diesem gezogenen Losen haben 95 die Mitte ihrer besten Verschiebung in {shifts}.")
	AimRegulation       = say2("{n} of {all} that fail in the mean rate needed nothing but regulating.", "{n} sur {all} qui échouent par la marche moyenne n’avaient besoin que d’un réglage.", "{n} von {all}, die am mittleren Gang scheitern, brauchten nichts als Regulieren.").unsure(FR)
	AimNone             = say("No shift would let any movement pass.", "Aucun décalage ne ferait réussir un mouvement.", "Keine Verschiebung ließe ein Werk bestehen.")
	NothingJudgedInFull = say("No movement is judged in full yet: nothing to shift.", "Aucun mouvement n’est encore entièrement jugé : rien à décaler.", "Noch kein Werk ist vollständig beurteilt: nichts zu verschieben.")
	AimShift            = say("Shift all rates by, s/d", "Décaler toutes les marches de, s/d", "Alle Gänge verschieben um, s/d")
	AimAsk              = say("Count", "Compter", "Zählen")
	AimAsked            = say4("Shifted by {shift}: {pass} of {n} pass, {share}.", "Décalées de {shift} : {pass} sur {n} réussissent, {share}.", "Verschoben um {shift}: {pass} von {n} bestehen, {share}.")
	AimShiftWrong       = say("Type a number with its sign, such as +1.5.", "Saisissez un nombre avec son signe, par exemple +1,5.", "Geben Sie eine Zahl mit Vorzeichen ein, etwa +1,5.")
	AimShiftFar         = say("No rate lies beyond 600 s/d.", "Aucune marche ne dépasse 600 s/d.", "Kein Gang liegt über 600 s/d.")
	AimShiftHead        = say("Shift, s/d", "Décalage, s/d", "Verschiebung, s/d")
	AimPassHead         = say("Would pass", "Réussiraient", "Bestünden")
	AimMeans            = say("For the workshop that regulates: plus gains. A shift moves the mean rate and leaves all else as it is. Movements rejected for cause, withdrawn, void or not judged in full are left out. Nothing here changes a verdict.", "Pour l’atelier qui règle : plus avance. Un décalage change la marche moyenne et rien d’autre. Les mouvements refusés pour cause, retirés, annulés ou pas entièrement jugés n’y entrent pas. Rien ici ne change un verdict.", "Für die Werkstatt, die reguliert: Plus geht vor. Eine Verschiebung ändert den mittleren Gang und sonst nichts. Aus Grund zurückgewiesene, zurückgezogene, ungültige und nicht vollständig beurteilte Werke bleiben außen vor. Nichts hier ändert ein Urteil.")
	AimBelow            = say("What if all rates were shifted?", "Et si toutes les marches étaient décalées ?", "Und wenn alle Gänge verschoben wären?")
)
