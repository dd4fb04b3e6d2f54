package words

// How sure a verdict is: for the lead alone.
var (
	DoubtTitle   = say("Doubt and hinge readings", "Doute et relevés charnières", "Zweifel und entscheidende Ablesungen").unsure(FR, DE)
	DoubtShow    = say("Show how sure the verdict is", "Montrer si le verdict est sûr", "Zeigen, wie sicher das Urteil ist")
	DoubtInside  = say("For the laboratory alone: it stands on no certificate.", "Pour le laboratoire seul : ne figure sur aucun bulletin.", "Nur für das Labor: Es steht auf keinem Gangschein.")
	DoubtRests   = say2("Reading resolution only: {step} s, standard uncertainty {u} s a state. Reader, chambers, handling and reference are left out, because no uncertainty budget is entered; with them the doubt is greater as a rule.", "Résolution du relevé seule : {step} s, incertitude-type {u} s par état. Lecteur, enceintes, manipulation et référence n’y entrent pas, car aucun budget d’incertitude n’est saisi ; avec eux le doute est en règle générale plus grand.", "Nur die Auflösung der Ablesung: {step} s, Standardunsicherheit {u} s je Stand. Ableser, Klimaschränke, Handhabung und Referenz fehlen, weil kein Unsicherheitsbudget eingetragen ist; mit ihnen ist der Zweifel in der Regel größer.").unsure(FR)
	DoubtTyped   = say("Some rates were typed without states; that they share their readings with the days beside them is assumed.", "Des marches ont été saisies sans états ; on suppose qu’elles partagent leurs relevés avec les jours voisins.", "Einige Gänge wurden ohne Stände eingegeben; angenommen wird, dass sie ihre Ablesungen mit den Nachbartagen teilen.")
	DoubtOf      = say1("probability that it is wrong: {percent} %", "probabilité qu’il soit faux : {percent} %", "Wahrscheinlichkeit, dass es falsch ist: {percent} %")
	DoubtNone    = say("There is no verdict to doubt.", "Il n’y a pas de verdict à mettre en doute.", "Es gibt kein Urteil, das zu bezweifeln wäre.")
	DoubtEnded   = say("It has left the trial: this speaks of its rates alone.", "Il est sorti de l’épreuve : ceci ne parle que de ses marches.", "Es ist aus der Prüfung ausgeschieden: Hier geht es nur um seine Gänge.")
	ChanceInside = say("Truly inside, %", "Vraiment dans les limites, %", "Wirklich innerhalb, %")
	HingeTitle   = say("On which reading it hangs", "De quel relevé il dépend", "An welcher Ablesung es hängt")
	HingeNone    = say("No change of a single reading would make it another verdict.", "Aucun changement d’un seul relevé ne donnerait un autre verdict.", "Keine Änderung einer einzelnen Ablesung ergäbe ein anderes Urteil.")
	HingeChange  = say("Other by, s", "Autre de, s", "Anders um, s").unsure(FR, DE)
	HingeTo      = say("Then", "Alors", "Dann")
	HingeBy      = say("By", "Par", "Durch")
	HingeMeans   = say("The smallest change of one state that makes it another verdict, exactly; the smallest first. Look at these readings before the paper leaves the house.", "Le plus petit changement d’un seul état qui donne un autre verdict, exactement ; le plus petit d’abord. Regardez ces relevés avant que le document parte.", "Die kleinste Änderung eines einzelnen Standes, die ein anderes Urteil ergibt, exakt; die kleinste zuerst. Sehen Sie diese Ablesungen an, bevor das Papier das Haus verlässt.")
)
