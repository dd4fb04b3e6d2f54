package words

// The outlook on the page of a batch: what open movements will probably do.
var (
	OutlookTitle    = say("Outlook", "Perspectives", "Aussicht").unsure(FR, DE)
	OutlookShow     = say("Estimate how many open movements will pass", "Estimer combien de mouvements en cours réussiront", "Schätzen, wie viele offene Werke bestehen werden")
	OutlookNone     = say("No movement is open.", "Aucun mouvement n’est en cours.", "Kein Werk ist offen.")
	OutlookLead     = say3("Of {n} open movements about {pass} will pass, so that the yield would be about {share}.", "Sur {n} mouvements en cours, {pass} environ réussiront ; le taux de réussite serait d’environ {share}.", "Von {n} offenen Werken werden etwa {pass} bestehen; die Ausbeute läge bei etwa {share}.")
	OutlookHistory  = say2("From {own} earlier movements of this calibre and {all} in all on this programme.", "D’après {own} mouvements antérieurs de ce calibre et {all} en tout sur ce programme.", "Aus {own} früheren Werken dieses Kalibers und {all} insgesamt nach diesem Programm.")
	OutlookNoPast   = say("No earlier movement is known on this programme: spreads that fit most movements stand in for it.", "Aucun mouvement antérieur n’est connu sur ce programme : des dispersions courantes en tiennent lieu.", "Zu diesem Programm ist kein früheres Werk bekannt: Streuungen, die auf die meisten Werke passen, stehen dafür.")
	OutlookMeans    = say("An estimate, not a verdict: it comes from each movement’s own days and from earlier ones. Early in a trial chances in the middle come out a few points too high.", "Une estimation, non un verdict : elle vient des jours de chaque mouvement et des mouvements antérieurs. En début d’épreuve, les probabilités moyennes sont de quelques points trop élevées.", "Eine Schätzung, kein Urteil: aus den eigenen Tagen jedes Werks und aus früheren. Früh in der Prüfung fallen mittlere Wahrscheinlichkeiten einige Punkte zu hoch aus.")
	OutlookChance   = say("Will pass, %", "Réussira, %", "Wird bestehen, %")
	OutlookDaysRead = say("Days read", "Jours lus", "Gelesene Tage")
	OutlookLeast    = say("Least likely to pass", "Les moins probables", "Am wenigsten wahrscheinlich")
)
