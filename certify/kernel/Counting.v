(** * Kind counting: weights whose sum no Hamiltonian cycle can afford

    Each weight stands for an inequality that holds for every Hamiltonian cycle: the degree at
    a vertex, a cut, a parity (FORMAT.md, section 6). Their weighted sum says that the scores
    of the cycle's edges add up to at least [need]; they cannot exceed [offer]. *)

From Coq Require Import Bool List Permutation PArith ZArith FMapPositive Lia.
From Certify Require Import Statement Question Edges Facts Totals Sets.
Import ListNotations.

Implicit Types (a b u v x y : vertex) (e f : vertex * vertex) (s : list vertex)
  (set : PositiveMap.t unit) (z : Z).
Local Open Scope Z_scope.

Record counting := {
  weights : list (vertex * Z);
  cuts : list (list vertex * Z);
  parities : list (list vertex * list (vertex * vertex) * Z)
}.

(** ** Scores of edges *)

Definition scores := PositiveMap.t (PositiveMap.t Z).

Definition score (m : scores) (e : vertex * vertex) : Z :=
  match PositiveMap.find (fst e) m with
  | Some row => match PositiveMap.find (snd e) row with Some z => z | None => 0 end
  | None => 0
  end.

Definition add_score (z : Z) (m : scores) (e : vertex * vertex) : scores :=
  let row := match PositiveMap.find (fst e) m with
             | Some row => row
             | None => PositiveMap.empty Z
             end in
  let old := match PositiveMap.find (snd e) row with Some old => old | None => 0 end in
  PositiveMap.add (fst e) (PositiveMap.add (snd e) (old + z) row) m.

(** ** The edges of each inequality *)

(** The edges at a vertex. *)
Definition star (near : PositiveMap.t (list vertex)) (v : vertex) : list (vertex * vertex) :=
  map (fun u => ordered (v, u)) (neighbours near v).

(** The edges with one end in a set, which is given as a list and as a map. *)
Definition leaving (near : PositiveMap.t (list vertex)) (s : list vertex)
    (set : PositiveMap.t unit) : list (vertex * vertex) :=
  flat_map (fun u => map (fun w => ordered (u, w))
                       (filter (fun w => negb (PositiveMap.mem w set)) (neighbours near u))) s.

(** A cut set is neither empty nor everything. *)
Definition proper (Q : question) (last : positive) (s : list vertex) : bool :=
  vertex_set last s && (1 <=? length s)%nat && (length s <? order Q)%nat.

(** An edge that leaves a set. *)
Definition crosses (near : PositiveMap.t (list vertex)) (set : PositiveMap.t unit)
    (e : vertex * vertex) : bool :=
  (fst e <? snd e)%positive && existsb (Pos.eqb (snd e)) (neighbours near (fst e))
  && leaves (fun v => PositiveMap.mem v set) e.

(** ** One step for each inequality: scores and need so far, [None] when it is not fine *)

Definition state : Type := scores * Z.

Definition add_weight (near : PositiveMap.t (list vertex)) (t : state) (w : vertex * Z) : state :=
  (fold_left (add_score (snd w)) (star near (fst w)) (fst t), snd t + 2 * snd w).

Definition add_cut (near : PositiveMap.t (list vertex)) (t : state) (c : list vertex * Z) : state :=
  let '(s, z) := c in
  (fold_left (add_score z) (leaving near s (members s)) (fst t), snd t + 2 * z).

Definition add_parity (near : PositiveMap.t (list vertex)) (t : state)
    (p : list vertex * list (vertex * vertex) * Z) : state :=
  let '(s, F, z) := p in
  (fold_left (add_score (-2 * z)) F
     (fold_left (add_score z) (leaving near s (members s)) (fst t)),
   snd t + z * (1 - Z.of_nat (length F))).

Definition weights_fine (last : positive) (l : list (vertex * Z)) : bool :=
  vertex_set last (map fst l) && forallb (fun w => negb (snd w =? 0)) l.

Definition cut_fine (Q : question) (last : positive) (c : list vertex * Z) : bool :=
  proper Q last (fst c) && (0 <? snd c).

Definition parity_fine (Q : question) (near : PositiveMap.t (list vertex)) (last : positive)
    (p : list vertex * list (vertex * vertex) * Z) : bool :=
  let '(s, F, z) := p in
  proper Q last s && (0 <? z) && Nat.odd (length F) && sorted_pairs F
  && forallb (crosses near (members s)) F.

(** Needed edges offer their score, the others theirs if it is positive. Both lists are
    sorted; [t] is the offer so far. *)
Fixpoint offer (m : scores) (edges needed : list (vertex * vertex)) (t : Z) : Z :=
  match edges with
  | [] => t
  | e :: edges =>
      match needed with
      | f :: rest =>
          if pair_eqb e f then offer m edges rest (t + score m e)
          else offer m edges needed (t + Z.max 0 (score m e))
      | [] => offer m edges [] (t + Z.max 0 (score m e))
      end
  end.

Definition check_counting (Q : question) (c : counting) : bool :=
  let near := adjacency Q in
  let last := last_vertex Q in
  (3 <=? order Q)%nat && weights_fine last (weights c) && forallb (cut_fine Q last) (cuts c)
  && forallb (parity_fine Q near last) (parities c)
  && (let start := (PositiveMap.empty _, 0) in
      let one := fold_left (add_weight near) (weights c) start in
      let two := fold_left (add_cut near) (cuts c) one in
      let '(m, need) := fold_left (add_parity near) (parities c) two in
      offer m (edges Q) (needed Q) 0 <? need).

(** ** Why it is right *)

Lemma score_add : forall z m e f,
  score (add_score z m e) f = score m f + z * Z.b2z (pair_eqb e f).
Proof.
  intros z m [u v] [x y]. unfold score, add_score, pair_eqb. cbn [fst snd].
  destruct (Pos.eqb_spec u x) as [<- | differ].
  - rewrite PositiveMap.gss. destruct (Pos.eqb_spec v y) as [<- | other].
    + rewrite PositiveMap.gss. cbn [andb Z.b2z]. destruct (PositiveMap.find u m) as [row |].
      * destruct (PositiveMap.find v row); lia.
      * rewrite PositiveMap.gempty. lia.
    + rewrite PositiveMap.gso by congruence. cbn [andb Z.b2z].
      destruct (PositiveMap.find u m) as [row |]; [| rewrite PositiveMap.gempty]; lia.
  - rewrite PositiveMap.gso by congruence. cbn [andb Z.b2z]. lia.
Qed.

Lemma score_adds : forall z l m f,
  score (fold_left (add_score z) l m) f
  = score m f + z * Z.of_nat (count (fun e => pair_eqb e f) l).
Proof.
  intros z l. induction l as [| e l IH]; intros m f; [cbn; lia |].
  cbn [fold_left]. rewrite IH, score_add. unfold count. cbn [filter].
  destruct (pair_eqb e f); cbn [length Z.b2z]; lia.
Qed.

Lemma fold_invariant : forall (A B : Type) (good : B -> Prop) (fine : A -> Prop)
    (step : B -> A -> B),
  (forall t i, fine i -> good t -> good (step t i)) ->
  forall l t, (forall i, In i l -> fine i) -> good t -> good (fold_left step l t).
Proof.
  intros A B good fine step keeps l. induction l as [| i l IH]; intros t all start; [exact start |].
  cbn [fold_left]. apply IH; [intros j listed; apply all; now right |].
  apply keeps; [apply all; now left | exact start].
Qed.

(** What may be at most offered, whichever edges are used, as long as the needed ones are. *)
Lemma offer_enough : forall (used : vertex * vertex -> bool) m edges needed t,
  (forall f, In f needed -> used f = true) ->
  sum (score m) (filter used edges) + t <= offer m edges needed t.
Proof.
  intros used m edges. induction edges as [| e edges IH]; intros needed t all_used; [cbn; lia |].
  assert (free : forall rest, (forall f, In f rest -> used f = true) ->
            sum (score m) (filter used (e :: edges)) + t
            <= offer m edges rest (t + Z.max 0 (score m e))).
  { intros rest rest_used. specialize (IH rest (t + Z.max 0 (score m e)) rest_used).
    cbn [filter]. destruct (used e); cbn [sum]; lia. }
  cbn [offer]. destruct needed as [| f rest]; [now apply free |].
  destruct (pair_eqb e f) eqn:same; [| now apply free].
  apply pair_eqb_spec in same as <-.
  specialize (IH rest (t + score m e) (fun g listed => all_used g (or_intror listed))).
  cbn [filter]. rewrite (all_used e (or_introl eq_refl)). cbn [sum]. lia.
Qed.

Section Sound.

Variable Q : question.
Hypothesis fine : well_formed Q = true.

(** *** The edges at a vertex and those that leave a set, each once *)

Lemma star_count : forall v f, In f (edges Q) ->
  Z.of_nat (count (fun e => pair_eqb e f) (star (adjacency Q) v)) = Z.b2z (touches v f).
Proof.
  intros v [x y] listed. destruct (well_formed_spec Q fine) as (up & _).
  assert (apart : forall u, In u (neighbours (adjacency Q) v) -> v <> u)
    by (intros u; rewrite (neighbours_joined Q fine); apply (joined_differ Q fine)).
  apply (count_equal _ pair_eqb pair_eqb_spec).
  - apply distinct_map; [| now apply (neighbours_distinct Q fine)].
    intros a b a_in b_in same. apply apart in a_in, b_in.
    apply ordered_same in same as [[= E] | [= E F]]; congruence.
  - unfold star, touches. rewrite in_map_iff, orb_true_iff, !Pos.eqb_eq. cbn [fst snd]. split.
    + intros [-> | ->].
      * exists y. rewrite (neighbours_joined Q fine). split; [| now left].
        apply up in listed. destruct (ordered_cases v y) as [[_ ->] | [? _]]; [easy | lia].
      * exists x. rewrite (neighbours_joined Q fine). split; [| now right].
        apply up in listed. destruct (ordered_cases v x) as [[? _] | [_ ->]]; [lia | easy].
    + intros (u & is & _). destruct (ordered_cases v u) as [[_ E] | [_ E]];
        rewrite E in is; injection is as <- <-; tauto.
Qed.

Lemma leaving_in : forall s set u v, In (u, v) (leaving (adjacency Q) s set) ->
  exists a b, In a s /\ PositiveMap.mem b set = false /\ joined Q a b /\ ordered (a, b) = (u, v).
Proof.
  intros s set u v found. apply in_flat_map in found as (a & a_in & found).
  apply in_map_iff in found as (b & is & found). apply filter_In in found as [near out].
  exists a, b. rewrite <- (neighbours_joined Q fine). repeat split; try assumption.
  now destruct (PositiveMap.mem b set).
Qed.

(** No edge is found twice: it has one end in the set, and is found from there. *)
Lemma leaving_distinct : forall s set, NoDup s ->
  (forall u, In u s -> PositiveMap.mem u set = true) -> NoDup (leaving (adjacency Q) s set).
Proof.
  intros s set distinct. induction distinct as [| u s fresh _ IH]; intros inside; [constructor |].
  cbn [leaving flat_map]. apply distinct_app.
  - apply distinct_map; [| apply NoDup_filter, (neighbours_distinct Q fine)].
    intros v w v_in w_in same. apply filter_In in v_in as [v_in _].
    apply (neighbours_joined Q fine) in v_in. pose proof (joined_differ Q fine u v v_in).
    apply ordered_same in same as [[= E] | [= E F]]; congruence.
  - apply IH. intros v listed. apply inside. now right.
  - intros [x y] here there. apply in_map_iff in here as (w & is & _).
    apply leaving_in in there as (a & b & a_in & b_out & _ & also).
    rewrite <- also in is. apply ordered_same in is as [[= -> _] | [= -> _]]; [easy |].
    rewrite inside in b_out by now left. discriminate.
Qed.

Lemma leaving_count : forall s f, NoDup s -> In f (edges Q) ->
  Z.of_nat (count (fun e => pair_eqb e f) (leaving (adjacency Q) s (members s)))
  = Z.b2z (leaves (fun v => PositiveMap.mem v (members s)) f).
Proof.
  intros s [x y] distinct listed. destruct (well_formed_spec Q fine) as (up & _).
  pose proof (members_spec s) as member.
  apply (count_equal _ pair_eqb pair_eqb_spec).
  - apply leaving_distinct; [exact distinct | intros v; apply member].
  - unfold leaves. cbn [fst snd]. split.
    + intros side. apply in_flat_map.
      destruct (PositiveMap.mem x (members s)) eqn:x_side,
        (PositiveMap.mem y (members s)) eqn:y_side; try discriminate side.
      * exists x. split; [now apply member |]. apply in_map_iff. exists y.
        rewrite filter_In, y_side, (neighbours_joined Q fine). split; [| split; [now left | easy]].
        apply up in listed. destruct (ordered_cases x y) as [[_ ->] | [? _]]; [easy | lia].
      * exists y. split; [now apply member |]. apply in_map_iff. exists x.
        rewrite filter_In, x_side, (neighbours_joined Q fine). split; [| split; [now right | easy]].
        apply up in listed. destruct (ordered_cases y x) as [[? _] | [_ ->]]; [lia | easy].
    + intros found. apply leaving_in in found as (a & b & a_in & b_out & _ & is).
      apply member in a_in.
      destruct (ordered_cases a b) as [[_ E] | [_ E]]; rewrite E in is;
        injection is as <- <-; now rewrite a_in, b_out.
Qed.

Lemma crosses_spec : forall set e, crosses (adjacency Q) set e = true ->
  In e (edges Q) /\ leaves (fun v => PositiveMap.mem v set) e = true.
Proof.
  intros set [u v] why. unfold crosses in why. rewrite !andb_true_iff in why. cbn [fst snd] in why.
  destruct why as [[less near] out]. split; [| exact out]. apply Pos.ltb_lt in less.
  apply existsb_exists in near as (w & near & same). apply Pos.eqb_eq in same as <-.
  apply (neighbours_joined Q fine) in near as [listed | back]; [exact listed |].
  destruct (well_formed_spec Q fine) as (up & _). apply up in back. lia.
Qed.

Hypothesis three : (3 <= order Q)%nat.

Lemma proper_spec : forall s, proper Q (last_vertex Q) s = true ->
  NoDup s /\ exists u v, In u (all_vertices (order Q)) /\ In v (all_vertices (order Q)) /\
    PositiveMap.mem u (members s) = true /\ PositiveMap.mem v (members s) = false.
Proof.
  intros s why. unfold proper in why. rewrite !andb_true_iff in why.
  destruct why as [[good some] small].
  apply vertex_set_spec in good as [distinct range]; [| lia]. split; [exact distinct |].
  apply Nat.leb_le in some. apply Nat.ltb_lt in small.
  destruct (misses Q s small) as (v & v_in & v_out).
  destruct s as [| u s]; [cbn in some; lia |].
  exists u, v. repeat split; [apply range; now left | exact v_in | |].
  - apply members_spec. now left.
  - apply not_true_is_false. now rewrite members_spec.
Qed.

(** *** Each step keeps: the total of the scores is at least the need *)

Variable h : list vertex.
Hypothesis ham : cycle Q h.

Definition afforded (t : state) : Prop := snd t <= total Q h (score (fst t)).

(** Adding scores adds to the total. *)
Lemma total_adds : forall z l m g,
  (forall f, In f (edges Q) -> Z.of_nat (count (fun e => pair_eqb e f) l) = g f) ->
  total Q h (score (fold_left (add_score z) l m)) = total Q h (score m) + z * total Q h g.
Proof.
  intros z l m g same. rewrite <- total_times, <- total_plus.
  apply sum_ext. intros f found. apply filter_In in found as [listed _].
  now rewrite score_adds, same.
Qed.

Lemma weight_afforded : forall t w, In (fst w) (all_vertices (order Q)) ->
  afforded t -> afforded (add_weight (adjacency Q) t w).
Proof.
  intros [m need] [v y] visited start. unfold afforded, add_weight in *. cbn [fst snd] in *.
  rewrite (total_adds _ _ _ (fun e => Z.b2z (touches v e))) by now apply star_count.
  rewrite (total_touches Q fine h ham v visited). lia.
Qed.

Lemma cut_afforded : forall t c, cut_fine Q (last_vertex Q) c = true ->
  afforded t -> afforded (add_cut (adjacency Q) t c).
Proof.
  intros [m need] [s z] good start. unfold cut_fine in good. cbn [fst snd] in good.
  apply andb_true_iff in good as [good positive]. apply Z.ltb_lt in positive.
  apply proper_spec in good as (distinct & u & v & u_in & v_in & u_side & v_side).
  unfold afforded, add_cut in *. cbn [fst snd] in *.
  rewrite (total_adds _ _ _ (fun e => Z.b2z (leaves (fun v => PositiveMap.mem v (members s)) e)))
    by (intros f listed; now apply leaving_count).
  pose proof (total_leaves Q fine h ham (fun v => PositiveMap.mem v (members s))
                u v u_in v_in u_side v_side). nia.
Qed.

Lemma parity_afforded : forall t p, parity_fine Q (adjacency Q) (last_vertex Q) p = true ->
  afforded t -> afforded (add_parity (adjacency Q) t p).
Proof.
  intros [m need] [[s F] z] good start. unfold parity_fine in good.
  rewrite !andb_true_iff, forallb_forall in good.
  destruct good as [[[[good positive] odd] sorted] crossing]. apply Z.ltb_lt in positive.
  apply proper_spec in good as (distinct & _). apply sorted_pairs_distinct in sorted.
  unfold afforded, add_parity in *. cbn [fst snd] in *.
  set (side := fun v => PositiveMap.mem v (members s)).
  assert (flipped : forall f, Z.of_nat (count (fun e => pair_eqb e f) F)
                    = Z.b2z (existsb (pair_eqb f) F)).
  { intros f. apply (count_equal _ pair_eqb pair_eqb_spec); [exact sorted |].
    rewrite existsb_exists. split.
    - intros (g & listed & same). now apply pair_eqb_spec in same as ->.
    - intros listed. exists f. now rewrite pair_eqb_spec. }
  rewrite (total_adds _ _ _ (fun e => Z.b2z (existsb (pair_eqb e) F)))
    by (intros; apply flipped).
  rewrite (total_adds _ _ _ (fun e => Z.b2z (leaves side e)))
    by (intros f listed; now apply leaving_count).
  assert (parity := total_parity Q fine h ham side F sorted odd
                      (fun e listed => crosses_spec _ e (crossing e listed))).
  assert (total Q h (fun e => Z.b2z (leaves side e) - 2 * Z.b2z (existsb (pair_eqb e) F))
          = total Q h (fun e => Z.b2z (leaves side e))
            + - (2) * total Q h (fun e => Z.b2z (existsb (pair_eqb e) F))) as split_total.
  { rewrite <- total_times, <- total_plus. apply sum_ext. intros. lia. }
  nia.
Qed.

Lemma counting_sound : forall c, check_counting Q c = true -> False.
Proof.
  intros c why. unfold check_counting in why. cbn zeta in why.
  rewrite !andb_true_iff, !forallb_forall in why.
  destruct why as [[[[_ weights_good] cuts_good] parities_good] more].
  apply andb_true_iff in weights_good as [vertices_good _].
  apply vertex_set_spec in vertices_good as [_ range]; [| lia].
  set (final := fold_left (add_parity _) _ _) in more.
  assert (enough : afforded final).
  { apply (fold_invariant _ _ afforded _ _ parity_afforded); [exact parities_good |].
    apply (fold_invariant _ _ afforded _ _ cut_afforded); [exact cuts_good |].
    apply (fold_invariant _ _ afforded _ _ weight_afforded).
    - intros w listed. apply range. now apply in_map.
    - unfold afforded, total. cbn [fst snd].
      rewrite (sum_ext _ _ (fun _ => 0)); [rewrite sum_constant; lia |].
      intros [u v] _. unfold score. cbn [fst snd]. now rewrite PositiveMap.gempty. }
  destruct final as [m need]. apply Z.ltb_lt in more. unfold afforded, total in enough.
  cbn [fst snd] in enough.
  pose proof (offer_enough (uses h) m (edges Q) (needed Q) 0) as most.
  enough (forall f, In f (needed Q) -> uses h f = true) as all_used
    by (specialize (most all_used); lia).
  intros [u v] listed. apply (uses_spec Q fine h ham).
  destruct ham as (_ & _ & _ & must). now apply must.
Qed.

End Sound.

Theorem check_counting_sound : forall Q c,
  well_formed Q = true -> check_counting Q c = true -> refuted Q.
Proof.
  intros Q c fine why (h & ham). assert (three : (3 <= order Q)%nat).
  { unfold check_counting in why. cbn zeta in why. rewrite !andb_true_iff in why.
    now apply Nat.leb_le. }
  apply (counting_sound Q fine three h ham c why).
Qed.
